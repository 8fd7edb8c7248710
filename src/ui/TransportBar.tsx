import { AudioLines, Pause, Play, Redo2, Repeat, SkipBack, Undo2, ZoomIn, ZoomOut } from "lucide-react";
import type { ReactNode } from "react";
import { useStore } from "zustand";
import { desk } from "./desk.ts";
import { loopSection } from "./loop-section.ts";
import { Tally } from "./Masthead.tsx";
import { useStudio, useStudioState } from "./studio-context.ts";
import { useFrameLoop } from "./use-frame.ts";
import { zoomStrip } from "./zoom-strip.ts";

/** Playing, looking closer, and taking back: the few things the hand needs all day. */
export function TransportBar() {
	const studio = useStudio();
	const loop = useFrameLoop();
	const { commands } = studio;
	const playback = useStudioState((state) => state.playback);
	const undo = useStudioState((state) => state.undo);
	const redo = useStudioState((state) => state.redo);
	const strip = useStore(desk, (state) => state.strip !== null);
	return (
		<div className="transport" role="toolbar" aria-label="Playing">
			<div className="group">
				<IconButton name="To the start (Home)" onPress={() => commands.seek(0)} icon={<SkipBack size={18} />} />
				<button
					type="button"
					className="first"
					onClick={() => (playback.playing ? commands.pause() : void commands.play())}
					title="Space"
				>
					{playback.playing ? <Pause size={18} aria-hidden /> : <Play size={18} aria-hidden />}
					{playback.playing ? "Pause" : "Play"}
				</button>
				<IconButton
					name="Loop this section (L)"
					pressed={playback.loop !== null}
					onPress={() => loopSection(studio)}
					icon={<Repeat size={18} />}
				/>
				<IconButton
					name="Click track (K)"
					pressed={playback.click}
					onPress={() => commands.setClick(!playback.click)}
					icon={<AudioLines size={18} />}
				/>
				<select
					aria-label="Tempo of playing"
					className="rate"
					value={playback.rate}
					onChange={(event) => commands.setRate(Number(event.target.value) as 0.5 | 0.75 | 1)}
				>
					<option value={1}>full tempo</option>
					<option value={0.75}>¾ tempo</option>
					<option value={0.5}>half tempo</option>
				</select>
			</div>
			<div className="group">
				<IconButton
					name={undo ? `Undo: ${undo} (Ctrl+Z)` : "Nothing to undo"}
					disabled={undo === null}
					onPress={() => commands.undo()}
					icon={<Undo2 size={18} />}
				/>
				<IconButton
					name={redo ? `Redo: ${redo} (Ctrl+Shift+Z)` : "Nothing to redo"}
					disabled={redo === null}
					onPress={() => commands.redo()}
					icon={<Redo2 size={18} />}
				/>
			</div>
			<div className="group">
				<button
					type="button"
					className="plain"
					aria-pressed={strip}
					onClick={() => zoomStrip({ studio, loop }, "toggle")}
					title="V"
				>
					{strip ? "Page view" : "Strip"}
				</button>
				<IconButton name="Zoom in (+)" onPress={() => zoomStrip({ studio, loop }, 0.6)} icon={<ZoomIn size={18} />} />
				<IconButton
					name="Zoom out (−)"
					disabled={!strip}
					onPress={() => zoomStrip({ studio, loop }, 1 / 0.6)}
					icon={<ZoomOut size={18} />}
				/>
			</div>
			<Jobs />
			<Tally />
		</div>
	);
}

function IconButton(props: {
	name: string;
	icon: ReactNode;
	onPress: () => void;
	pressed?: boolean;
	disabled?: boolean;
}) {
	return (
		<button
			type="button"
			className="icon plain"
			aria-label={props.name}
			title={props.name}
			aria-pressed={props.pressed}
			disabled={props.disabled}
			onClick={props.onPress}
		>
			{props.icon}
		</button>
	);
}

/** What is under way, how far it is, and the way to stop it. */
export function Jobs() {
	const jobs = useStudioState((state) => state.jobs);
	const { commands } = useStudio();
	return (
		<div className="jobs" role="status">
			{jobs.map((job) => (
				<div key={job.id} className="job">
					<span className="small">{job.name}</span>
					<progress aria-label={job.name} max={1} value={job.share ?? undefined} />
					<button type="button" className="plain small" onClick={() => commands.cancelJob(job.id)}>
						Cancel
					</button>
				</div>
			))}
		</div>
	);
}
