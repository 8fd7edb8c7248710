import { useMemo, useRef, useState } from "react";
import type { NewEdit } from "../../app/index.ts";
import type { Analysis } from "../../core/music/index.ts";
import { isCarried, type Stretch } from "../../core/retime/index.ts";
import { type BeatMap, createBeatMap, type Show } from "../../core/show/index.ts";
import { sayTime } from "../say-place.ts";
import { useStudio } from "../studio-context.ts";
import { MapPlayhead } from "./MapPlayhead.tsx";
import { sayLength, sayRate, sayStretch } from "./say-stretch.ts";
import { createScale, type Scale, wavePath } from "./scale.ts";
import { useWidth } from "./use-width.ts";

const WAVE = 56;
const RULER = 18;
/** Where the ribbons run: from under the old staff to above the new one. */
const TOP = RULER + WAVE;
const GAP = 92;
const HEIGHT = TOP + GAP + WAVE + RULER;
const INSET = 34;

interface RibbonsProps {
	show: Show;
	analysis: Analysis | null;
	edit: NewEdit;
	/** Cue that is pointed out. */
	chosen: string | null;
	choose: (id: string) => void;
}

/** Old soundtrack above, new one below, and between them what went where. */
export function Ribbons({ show, analysis, edit, chosen, choose }: RibbonsProps) {
	const host = useRef<HTMLDivElement>(null);
	const width = useWidth(host);
	const { map, result } = edit;
	const scale = useMemo(
		() => createScale(Math.max(200, width - 2 * INSET), Math.max(map.oldDuration, map.newDuration)),
		[width, map.oldDuration, map.newDuration],
	);
	const old = useMemo(() => createBeatMap(show.grid), [show.grid]);
	const current = useMemo(() => createBeatMap(result.show.grid), [result.show.grid]);
	return (
		<div className="ribbons" ref={host}>
			<svg width={width} height={HEIGHT} aria-labelledby="ribbons-title">
				<title id="ribbons-title">What went where: the old soundtrack above, the new one below</title>
				<defs>
					<pattern id="hatch-cut" width="7" height="7" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
						<line x1="0" y1="0" x2="0" y2="7" className="hatch" />
					</pattern>
					<pattern id="dots-inserted" width="7" height="7" patternUnits="userSpaceOnUse">
						<circle cx="2" cy="2" r="1.1" className="dot" />
					</pattern>
				</defs>
				<g transform={`translate(${INSET} 0)`}>
					<Staff show={show} analysis={analysis} beatMap={old} scale={scale} top={0} ruler="above" name="old" />
					<Staff
						show={result.show}
						analysis={edit.analysis}
						beatMap={current}
						scale={scale}
						top={TOP + GAP}
						ruler="below"
						name="new"
					/>
					{map.stretches.map((stretch, index) => (
						<StretchShape
							// biome-ignore lint/suspicious/noArrayIndexKey: a stretch is its place in the map
							key={index}
							stretch={stretch}
							scale={scale}
							old={old}
							current={current}
						/>
					))}
					<CueMarks edit={edit} scale={scale} chosen={chosen} choose={choose} />
					{map.stretches.map((stretch, index) =>
						isCarried(stretch)
							? (["start", "end"] as const).map((edge) => (
									<EdgeHandle
										// biome-ignore lint/suspicious/noArrayIndexKey: likewise
										key={`${index} ${edge}`}
										edit={edit}
										index={index}
										edge={edge}
										scale={scale}
										beatMap={current}
									/>
								))
							: null,
					)}
					{edit.anchors.map((pair) => (
						<line
							key={pair.new}
							className="anchor"
							x1={scale.x(pair.old)}
							x2={scale.x(pair.new)}
							y1={TOP}
							y2={TOP + GAP}
						/>
					))}
					<MapPlayhead edit={edit} scale={scale} wave={WAVE} ruler={RULER} gap={GAP} />
				</g>
			</svg>
		</div>
	);
}

/** Waveform with bar lines, bar numbers and the sections' letters. */
function Staff(props: {
	show: Show;
	analysis: Analysis | null;
	beatMap: BeatMap;
	scale: Scale;
	top: number;
	ruler: "above" | "below";
	name: "old" | "new";
}) {
	const { show, analysis, beatMap, scale, top, ruler, name } = props;
	const { commands } = useStudio();
	const wave = useMemo(() => (analysis === null ? "" : wavePath(analysis, scale, WAVE)), [analysis, scale]);
	const waveTop = ruler === "above" ? top + RULER : top;
	const words = ruler === "above" ? top + 12 : top + WAVE + 14;
	const bars = useMemo(() => {
		const lines = show.grid.bars.map((bar, index) => ({ index, x: scale.x(show.grid.beats[bar.beat] ?? 0) }));
		const apart = lines.length > 1 ? (lines[lines.length - 1].x - lines[0].x) / (lines.length - 1) : scale.width;
		const step = [1, 2, 4, 8, 16, 32].find((many) => many * apart > 6) ?? 64;
		return lines.filter(({ index }) => index % step === 0);
	}, [show.grid, scale]);
	return (
		<g>
			{/* biome-ignore lint/a11y/noStaticElementInteractions: places are reached by the keys that step through the music */}
			<rect
				className="staff"
				x={0}
				y={waveTop}
				width={scale.x(analysis?.duration ?? 0)}
				height={WAVE}
				onClick={(event) => {
					const x = event.clientX - (event.currentTarget as Element).getBoundingClientRect().left;
					void commands.hearEdit(name).then(() => commands.seek(scale.seconds(x)));
				}}
			/>
			{bars.map(({ index, x }) => (
				<line key={index} className="bar-line" x1={x} x2={x} y1={waveTop} y2={waveTop + WAVE} />
			))}
			<path className="wave" d={wave} transform={`translate(0 ${waveTop})`} />
			{show.sections.map((section) => (
				<text key={section.id} className="letter" x={scale.x(beatMap.secondsAt(section.from)) + 3} y={words}>
					{section.letter}
					<tspan className="bar-number" dx="5">
						{beatMap.barAt(section.from).bar}
					</tspan>
				</text>
			))}
			<text className="which" x={-INSET + 4} y={waveTop + WAVE / 2 + 4}>
				{name}
			</text>
		</g>
	);
}

function StretchShape({
	stretch,
	scale,
	old,
	current,
}: {
	stretch: Stretch;
	scale: Scale;
	old: BeatMap;
	current: BeatMap;
}) {
	const [a, b] = stretch.old.map(scale.x);
	const [c, d] = stretch.new.map(scale.x);
	const middle = TOP + GAP / 2;
	const title = <title>{sayStretch(stretch, old, current)}</title>;
	if (stretch.kind === "cut") {
		return (
			<g>
				{title}
				<rect className="cut" x={a} width={b - a} y={RULER} height={WAVE} fill="url(#hatch-cut)" />
				<path className="cut-fold" d={`M${a} ${TOP}L${c} ${TOP + GAP}L${b} ${TOP}Z`} />
				{b - a > 54 && (
					<text className="gone" x={(a + b) / 2} y={TOP + 14} textAnchor="middle">
						cut · {sayLength(stretch.old[0], stretch.old[1], old)}
					</text>
				)}
			</g>
		);
	}
	if (stretch.kind === "inserted") {
		return (
			<g>
				{title}
				<rect className="inserted" x={c} width={d - c} y={TOP + GAP} height={WAVE} fill="url(#dots-inserted)" />
				<path className="inserted-fold" d={`M${a} ${TOP}L${c} ${TOP + GAP}L${d} ${TOP + GAP}Z`} />
				{d - c > 54 && (
					<text className="put-in" x={(c + d) / 2} y={TOP + GAP - 6} textAnchor="middle">
						put in · {sayLength(stretch.new[0], stretch.new[1], current)}
					</text>
				)}
			</g>
		);
	}
	const rate = sayRate(stretch.rate);
	// A ribbon hangs straight at both ends and crosses over between them.
	const side = (from: number, to: number) => `C${from} ${middle} ${to} ${middle} ${to} ${TOP + GAP}`;
	const back = (from: number, to: number) => `C${from} ${middle} ${to} ${middle} ${to} ${TOP}`;
	return (
		<g>
			{title}
			<path
				className={stretch.kind === "stretched" ? "ribbon stretched" : "ribbon"}
				fillOpacity={0.12 + 0.2 * stretch.confidence}
				d={`M${a} ${TOP}${side(a, c)}L${d} ${TOP + GAP}${back(d, b)}Z`}
			/>
			{rate !== "" && Math.min(b - a, d - c) > 70 && (
				<text className="rate-word" x={(a + b + c + d) / 4} y={middle + 4} textAnchor="middle">
					{rate}
				</text>
			)}
			{stretch.confidence < 0.7 && Math.min(b - a, d - c) > 50 && (
				<text className="unsure" x={(a + b + c + d) / 4} y={middle + 20} textAnchor="middle">
					{stretch.confidence < 0.3 ? "unsure" : "fairly sure"}
				</text>
			)}
		</g>
	);
}

function CueMarks({
	edit,
	scale,
	chosen,
	choose,
}: {
	edit: NewEdit;
	scale: Scale;
	chosen: string | null;
	choose: (id: string) => void;
}) {
	const bottom = TOP + GAP;
	return (
		<g className="cue-marks">
			{edit.result.cues.map((move) => {
				const x = scale.x(move.oldTime);
				const to = move.newTime === null ? null : scale.x(move.newTime);
				const kind = edit.choices.tray.has(move.id) ? "orphan" : move.status;
				return (
					// biome-ignore lint/a11y/noStaticElementInteractions: the table has every cue for the keyboard
					<g
						key={move.id}
						className={`cue-mark ${kind}${move.id === chosen ? " chosen" : ""}`}
						onClick={() => choose(move.id)}
					>
						<title>{`Cue ${move.number}: ${move.reason}`}</title>
						<path d={`M${x - 3} ${TOP - 7}L${x + 3} ${TOP - 7}L${x} ${TOP}Z`} />
						{to !== null && <path d={`M${to - 3} ${bottom + 7}L${to + 3} ${bottom + 7}L${to} ${bottom}Z`} />}
						{move.id === chosen && to !== null && <line x1={x} y1={TOP} x2={to} y2={bottom} />}
					</g>
				);
			})}
		</g>
	);
}

/** An edge of a ribbon on the new side: dragged, or moved by the arrow keys. */
function EdgeHandle(props: { edit: NewEdit; index: number; edge: "start" | "end"; scale: Scale; beatMap: BeatMap }) {
	const { edit, index, edge, scale, beatMap } = props;
	const { commands } = useStudio();
	const stretch = edit.map.stretches[index];
	const at = stretch.new[edge === "start" ? 0 : 1];
	const [held, setHeld] = useState<number | null>(null);
	const x = scale.x(held ?? at);
	const name = `${edge === "start" ? "Start" : "End"} of the music kept from ${sayTime(stretch.old[0])}`;
	const step = (seconds: number) => commands.moveEditEdge(index, edge, at + seconds);
	const toBeat = (direction: 1 | -1) => {
		const position = beatMap.positionAt(at);
		const next = direction > 0 ? Math.floor(position + 1e-3) + 1 : Math.ceil(position - 1e-3) - 1;
		commands.moveEditEdge(index, edge, beatMap.secondsAt(next));
	};
	const inward = edge === "start" ? 5 : -5;
	const secondsAt = (event: React.PointerEvent) => {
		const box = (event.currentTarget as SVGElement).ownerSVGElement?.getBoundingClientRect();
		return scale.seconds(event.clientX - (box?.left ?? 0) - INSET);
	};
	return (
		<g
			className="edge"
			role="slider"
			tabIndex={0}
			aria-label={name}
			aria-valuemin={0}
			aria-valuemax={Math.round(edit.map.newDuration * 1000) / 1000}
			aria-valuenow={Math.round(at * 1000) / 1000}
			aria-valuetext={`${sayTime(at)} of the new soundtrack`}
			onKeyDown={(event) => {
				const by = { ArrowLeft: -1, ArrowRight: 1 }[event.key];
				if (by === undefined) return;
				event.preventDefault();
				event.stopPropagation();
				if (event.shiftKey) toBeat(by as 1 | -1);
				else step(by * (event.altKey ? 0.001 : 0.01));
			}}
			onPointerDown={(event) => {
				event.currentTarget.setPointerCapture(event.pointerId);
				setHeld(at);
			}}
			onPointerMove={(event) => {
				if (held !== null) setHeld(Math.max(0, Math.min(edit.map.newDuration, secondsAt(event))));
			}}
			onPointerUp={() => {
				if (held !== null && Math.abs(held - at) > 1e-3) commands.moveEditEdge(index, edge, held);
				setHeld(null);
			}}
			onPointerCancel={() => setHeld(null)}
		>
			<title>{`${name}: drag it, or press the arrow keys (with Shift by beats)`}</title>
			<rect className="grip" x={x - 7} y={TOP + GAP - 16} width={14} height={WAVE + 16} />
			<path d={`M${x + inward} ${TOP + GAP - 10}L${x} ${TOP + GAP - 10}L${x} ${TOP + GAP + WAVE}`} />
		</g>
	);
}
