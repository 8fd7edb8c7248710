import { Pause, Play } from "lucide-react";
import { useState } from "react";
import type { NewEdit } from "../../app/index.ts";
import type { ShowCheck } from "../../core/flight/index.ts";
import { isCarried } from "../../core/retime/index.ts";
import { createBeatMap } from "../../core/show/index.ts";
import { useStudio, useStudioState } from "../studio-context.ts";
import { Jobs } from "../TransportBar.tsx";
import { AnchorFields } from "./AnchorFields.tsx";
import { CueTable } from "./CueTable.tsx";
import { Ribbons } from "./Ribbons.tsx";
import { sayLength, sayRate } from "./say-stretch.ts";

/** The new edit held against the old one; nothing of the show has changed until it is taken over. */
export function NewEditPane({ edit }: { edit: NewEdit }) {
	const studio = useStudio();
	const { commands } = studio;
	const show = useStudioState((state) => state.show);
	const analysis = useStudioState((state) => state.analysis);
	const check = useStudioState((state) => state.check);
	const playing = useStudioState((state) => state.playback.playing);
	const [chosen, setChosen] = useState<string | null>(null);
	if (show === null) return null;
	const choose = (id: string) => {
		setChosen(id);
		const move = edit.result.cues.find((one) => one.id === id);
		if (move) commands.seek(edit.hears === "new" && move.newTime !== null ? move.newTime : move.oldTime);
		if (move) commands.select({ kind: "cues", ids: [id] });
	};
	const count = (status: string) => edit.result.cues.filter((one) => one.status === status).length;
	const [review, gone] = [count("review") - edit.choices.looked.size, count("orphan") + edit.choices.tray.size];
	const short = tooShort(edit, check);
	const changed = edit.receipt.transitions.filter((one) => one.status === "changed" || one.status === "new").length;
	return (
		<div className="new-edit">
			<div className="transport" role="toolbar" aria-label="Listening to both">
				<div className="group">
					<button
						type="button"
						className="first"
						title="Space"
						onClick={() => (playing ? commands.pause() : void commands.play())}
					>
						{playing ? <Pause size={18} aria-hidden /> : <Play size={18} aria-hidden />}
						{playing ? "Pause" : "Play"}
					</button>
					<fieldset className="filter hears">
						<legend className="unseen">Which soundtrack is played (X)</legend>
						{(["old", "new"] as const).map((one) => (
							<label key={one}>
								<input
									type="radio"
									name="hears"
									checked={edit.hears === one}
									onChange={() => void commands.hearEdit(one)}
								/>
								{one === "old" ? "the old one" : "the new one"}
							</label>
						))}
						<kbd>X</kbd>
					</fieldset>
				</div>
				<Jobs />
				<div className="group apart">
					<button type="button" className="plain" onClick={() => commands.saveEditTable()}>
						Table as CSV
					</button>
					<button type="button" className="plain" onClick={() => window.print()}>
						Print
					</button>
				</div>
			</div>
			<Ribbons show={show} analysis={analysis} edit={edit} chosen={chosen} choose={choose} />
			<div className="edit-words">
				<h2>{edit.soundtrack.file}</h2>
				<p>
					{saySummary(edit)} {edit.result.cues.length} cues: {count("moved")} moved
					{review > 0 && <strong>, {review} to review</strong>}
					{gone > 0 && <strong>, {gone} to the tray</strong>}. {sayReceipt(edit, changed)}
				</p>
				{short.length > 0 && (
					<p className="trouble">
						{short.length === 1 ? "One transition" : `${short.length} transitions`} that flew before will not have the
						time {short.length === 1 ? "it needs" : "they need"}:{" "}
						{short
							.slice(0, 4)
							.map(
								({ cue, needed, has }) =>
									`cue ${show.cues.byId[cue]?.number ?? cue} needs ${needed.toFixed(1)} s and will have ${has.toFixed(1)} s`,
							)
							.join(", ")}
						{short.length > 4 && ", and more"}. Once taken over, each has its remedies.
					</p>
				)}
				{edit.result.notes.map((note) => (
					<p key={note} className="small">
						{note}
					</p>
				))}
				<div className="buttons">
					<button type="button" className="first" onClick={() => void commands.acceptNewEdit()}>
						Take over the new edit
					</button>
					<button type="button" onClick={() => void commands.dropNewEdit()}>
						Leave the show as it is
					</button>
				</div>
				<details>
					<summary>Correct what went where</summary>
					<p className="small quiet">
						Drag the edge of a ribbon, or press the arrow keys on it (with Shift by beats, with Alt by milliseconds). Or
						name a pair of places: all the rest is found anew around it.
					</p>
					<AnchorFields edit={edit} />
				</details>
			</div>
			<CueTable show={show} edit={edit} chosen={chosen} choose={choose} />
		</div>
	);
}

/** Transitions that fly now and would be over too soon: a plan's needed time does not hang on the music. */
function tooShort({ receipt }: NewEdit, check: ShowCheck | null) {
	const needs = new Map((check?.transitions ?? []).map((one) => [one.id, one]));
	return receipt.transitions.flatMap(({ cue, status, newDuration }) => {
		const known = needs.get(cue);
		if (known?.needed == null || !known.verdicts.includes("flies")) return [];
		if ((status !== "same" && status !== "dilated") || newDuration >= known.needed - 1e-9) return [];
		return [{ cue, needed: known.needed, has: newDuration }];
	});
}

function saySummary({ map, result }: NewEdit): string {
	const current = createBeatMap(result.show.grid);
	const words: string[] = [];
	for (const one of map.stretches) {
		if (one.kind === "cut" && one.old[1] - one.old[0] > 0.1) words.push(`${seconds(one.old)} were cut`);
		if (one.kind === "inserted" && one.new[1] - one.new[0] > 0.1) {
			words.push(`${sayLength(one.new[0], one.new[1], current)} put in`);
		}
	}
	const rates = new Set(
		map.stretches
			.filter(isCarried)
			.map((one) => sayRate(one.rate))
			.filter((rate) => rate !== ""),
	);
	if (rates.size === 1) words.push(`the music is ${[...rates][0]}`);
	if (rates.size > 1) words.push("the tempo differs from place to place");
	if (words.length === 0) return "All of the music is kept.";
	const text = words.slice(0, 5).join(", ");
	return `${text[0].toUpperCase()}${text.slice(1)}${words.length > 5 ? ", and more" : ""}.`;
}

const seconds = ([from, to]: readonly [number, number]): string => `${(to - from).toFixed(1)} s`;

function sayReceipt({ receipt }: NewEdit, changed: number): string {
	const all = receipt.transitions.length;
	if (all === 0) return "";
	if (changed === 0) return `All ${all} transitions keep their paths.`;
	return `${all - changed} of ${all} transitions keep their paths; ${changed} ${changed === 1 ? "is" : "are"} new.`;
}
