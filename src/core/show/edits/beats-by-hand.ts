import { StarstaveError } from "../../units/index.ts";
import { type BeatMap, createBeatMap } from "../grid.ts";
import type { Bar } from "../schema/show-file.ts";
import type { Grid } from "../show.ts";
import type { DraftShow } from "./apply-edit.ts";
import { setGrid } from "./grid-edits.ts";

/** Beats on either side that follow a beat moved by hand where no anchor is nearer. */
const REACH = 8;

/**
 * Moves a beat, which becomes an anchor: the beats between it and the nearest anchors (or the eighth beat away) follow
 * in proportion. Cues keep their positions and so go with their beats.
 * @throws StarstaveError where there is no such beat, or it would pass the anchor beside it
 */
export function moveBeat(draft: DraftShow, index: number, seconds: number): void {
	const beats = [...draft.grid.beats];
	if (!(index in beats))
		throw new StarstaveError("show", `The grid has no beat ${index}; it has ${beats.length}, counted from 0.`);
	const anchors = (draft.grid.anchors ?? []).filter((other) => other !== index);
	const left = Math.max(0, index - REACH, ...anchors.filter((other) => other < index));
	const right = Math.min(beats.length - 1, index + REACH, ...anchors.filter((other) => other > index));
	const [low, high] = [index > left ? beats[left] : -Infinity, index < right ? beats[right] : Infinity];
	if (!(seconds > low && seconds < high)) {
		throw new StarstaveError(
			"show",
			`Beat ${index + 1} can't stand at ${seconds.toFixed(3)} s: it stays between the beats held beside it, ${low.toFixed(3)} s and ${high.toFixed(3)} s.`,
		);
	}
	const old = beats[index];
	for (let i = left + 1; i < index; i++) beats[i] = low + ((beats[i] - low) * (seconds - low)) / (old - low);
	for (let i = index + 1; i < right; i++) beats[i] = high - ((high - beats[i]) * (high - seconds)) / (high - old);
	beats[index] = seconds;
	setGrid(draft, {
		...draft.grid,
		beats,
		anchors: [...anchors, index].sort((a, b) => a - b),
		source: "edited",
	});
}

/**
 * Puts a beat in half way between two; everything keeps its place in the music.
 * @param after index of the beat before it
 */
export function insertBeat(draft: DraftShow, after: number): void {
	const { beats, bars } = draft.grid;
	if (!(after in beats) || !(after + 1 in beats)) {
		throw new StarstaveError("show", `A beat is put in between two: beat ${after + 1} has none after it.`);
	}
	const at = (beats[after] + beats[after + 1]) / 2;
	const next = [...beats.slice(0, after + 1), at, ...beats.slice(after + 1)];
	const moved = bars.map((bar, k): Bar => {
		const ends = bars[k + 1]?.beat ?? beats.length;
		const holds = bar.beat <= after && after < ends;
		return { ...bar, beat: bar.beat > after ? bar.beat + 1 : bar.beat, beatsPerBar: bar.beatsPerBar + (holds ? 1 : 0) };
	});
	replaceBeats(draft, next, moved, (anchor) => (anchor > after ? anchor + 1 : anchor));
}

/** Takes a beat out; everything keeps its place in the music. */
export function deleteBeat(draft: DraftShow, index: number): void {
	const { beats, bars } = draft.grid;
	if (!(index in beats) || beats.length < 3) {
		throw new StarstaveError("show", `The grid has ${beats.length} beats; beat ${index + 1} can't be taken out.`);
	}
	const next = beats.filter((_, k) => k !== index);
	const moved: Bar[] = [];
	bars.forEach((bar, k) => {
		const ends = bars[k + 1]?.beat ?? beats.length;
		const holds = bar.beat <= index && index < ends;
		const beatsPerBar = bar.beatsPerBar - (holds ? 1 : 0);
		const beat = bar.beat > index ? bar.beat - 1 : bar.beat;
		// A bar of one beat goes with its beat.
		if (beatsPerBar >= 1 && beat < next.length && beat !== moved.at(-1)?.beat)
			moved.push({ ...bar, beat, beatsPerBar });
	});
	replaceBeats(draft, next, moved, (anchor) => (anchor === index ? null : anchor > index ? anchor - 1 : anchor));
}

/**
 * Puts other beats in the place of a stretch. Where as many beats stand there as before, positions stay and cues go with
 * their beats; else everything keeps its place in the music.
 * @param beats seconds, rising; bars begin as they did, at the beats nearest to where they began
 */
export function layBeats(draft: DraftShow, beats: readonly number[]): void {
	if (beats.length < 2) throw new StarstaveError("show", "A stretch of beats takes at least two of them.");
	const { grid } = draft;
	const half = (beats[beats.length - 1] - beats[0]) / (beats.length - 1) / 2;
	const before = grid.beats.filter((beat) => beat < beats[0] - half);
	const after = grid.beats.filter((beat) => beat > beats[beats.length - 1] + half);
	const within = grid.beats.length - before.length - after.length;
	const next = [...before, ...beats, ...after];
	const first = before.length;
	const moved: Bar[] = grid.bars.filter((bar) => bar.beat < first).map((bar) => ({ ...bar }));
	const inside = grid.bars.filter((bar) => bar.beat >= first && bar.beat < first + within);
	const beatsPerBar = inside[0]?.beatsPerBar ?? moved.at(-1)?.beatsPerBar ?? 4;
	const start = inside[0] === undefined ? first : first + nearest(beats, grid.beats[inside[0].beat]);
	for (let beat = start; beat < first + beats.length; beat += beatsPerBar) moved.push({ beat, beatsPerBar });
	for (const bar of grid.bars) {
		if (bar.beat >= first + within) moved.push({ ...bar, beat: bar.beat - within + beats.length });
	}
	const keep = (anchor: number): number | null =>
		anchor < first ? anchor : anchor < first + within ? null : anchor - within + beats.length;
	if (within === beats.length) {
		const anchors = (grid.anchors ?? []).map(keep).filter((anchor) => anchor !== null);
		setGrid(draft, { ...grid, beats: next, bars: moved, source: "edited", ...(grid.anchors ? { anchors } : {}) });
	} else replaceBeats(draft, next, moved, keep);
}

function nearest(beats: readonly number[], seconds: number): number {
	let best = 0;
	beats.forEach((beat, k) => {
		if (Math.abs(beat - seconds) < Math.abs(beats[best] - seconds)) best = k;
	});
	return best;
}

/** Another number of beats: every position goes over by its second. */
function replaceBeats(
	draft: DraftShow,
	beats: readonly number[],
	bars: readonly Bar[],
	anchorTo: (anchor: number) => number | null,
): void {
	const old = createBeatMap(draft.grid);
	const { anchors, ...rest } = draft.grid as Grid;
	const kept = (anchors ?? []).map(anchorTo).filter((anchor) => anchor !== null);
	const current = createBeatMap({ beats: [...beats], bars: [...bars] });
	for (const id of draft.cues.order) {
		const cue = draft.cues.byId[id];
		const from = carry(cue.at, old, current);
		cue.length = cue.length === 0 ? 0 : Math.max(0, carry(cue.at + cue.length, old, current) - from);
		cue.at = from;
	}
	for (const section of draft.sections) {
		section.from = carry(section.from, old, current);
		section.to = carry(section.to, old, current);
	}
	setGrid(draft, { ...rest, beats, bars, source: "edited", ...(kept.length > 0 ? { anchors: kept } : {}) });
}

function carry(position: number, old: BeatMap, current: BeatMap): number {
	const next = current.positionAt(old.secondsAt(position));
	const whole = Math.round(next);
	// On a beat it stays on a beat: rounding must not take it off.
	return Math.abs(next - whole) < 1e-6 ? whole : next;
}
