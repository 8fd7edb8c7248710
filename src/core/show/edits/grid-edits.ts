import { StarstaveError } from "../../units/index.ts";
import { requireGrid } from "../check-references.ts";
import type { Bar } from "../schema/show-file.ts";
import type { Grid } from "../show.ts";
import type { DraftShow } from "./apply-edit.ts";
import { checkCuesIn } from "./check-part.ts";

/** Replaces the grid whole. Cues keep their positions, so they move with their beats; pinned ones stay. */
export function setGrid(draft: DraftShow, grid: Grid): void {
	requireGrid(grid.beats, grid.bars);
	const { anchors, ...rest } = grid;
	draft.grid = {
		...rest,
		beats: [...grid.beats],
		bars: grid.bars.map((bar) => ({ ...bar })),
		...(anchors === undefined ? {} : { anchors: [...anchors] }),
	};
	checkCuesIn(draft);
}

function requireBeats(draft: DraftShow, least: number, what: string): void {
	if (draft.grid.beats.length >= least) return;
	throw new StarstaveError(
		"show",
		`The grid has ${draft.grid.beats.length} beats, but ${what} takes at least ${least}; let the music be analysed first.`,
	);
}

function edited(draft: DraftShow, beats: readonly number[], bars: readonly Bar[]): void {
	setGrid(draft, { ...draft.grid, beats, bars, source: "edited" });
}

/** Moves every beat by so many seconds; the cues go with them. */
export function shiftBeats(draft: DraftShow, seconds: number): void {
	edited(
		draft,
		draft.grid.beats.map((beat) => beat + seconds),
		draft.grid.bars,
	);
}

/** Lets the bars start so many beats later (earlier where negative). Bars that leave the grid are dropped. */
export function shiftBars(draft: DraftShow, beats: number): void {
	const { grid } = draft;
	const moved = grid.bars
		.map((bar) => ({ ...bar, beat: bar.beat + beats }))
		.filter((bar) => bar.beat >= 0 && bar.beat < grid.beats.length);
	edited(draft, grid.beats, moved);
}

/** Puts every position in the show through `map`, every length times `factor`. */
function scalePositions(draft: DraftShow, map: (position: number) => number, factor: number): void {
	for (const id of draft.cues.order) {
		const cue = draft.cues.byId[id];
		cue.at = map(cue.at);
		cue.length *= factor;
		if (cue.kind !== "transition") cue.fade *= factor;
		if (cue.kind === "colour" && "every" in cue.paint && typeof cue.paint.every === "number") cue.paint.every *= factor;
	}
	for (const section of draft.sections) {
		section.from = map(section.from);
		section.to = map(section.to);
	}
}

/** Anchors go to where their beats are now; those whose beat is gone are anchors no more. */
function moveAnchors(draft: DraftShow, map: (anchor: number) => number): void {
	const { anchors } = draft.grid;
	if (anchors !== undefined)
		draft.grid.anchors = anchors.map(map).filter((anchor) => Number.isInteger(anchor) && anchor >= 0);
}

/** Twice as many beats, in as many beats to the bar; everything keeps its place in the music. */
export function doubleBeats(draft: DraftShow): void {
	requireBeats(draft, 2, "doubling");
	const old = draft.grid.beats;
	const beats: number[] = [];
	for (let i = 0; i < old.length; i++) {
		beats.push(old[i]);
		// The last beat gets its second half from the interval before it.
		beats.push(i + 1 < old.length ? (old[i] + old[i + 1]) / 2 : old[i] + (old[i] - old[i - 1]) / 2);
	}
	const bars: Bar[] = [];
	draft.grid.bars.forEach((bar, i) => {
		const next = i + 1 < draft.grid.bars.length ? 2 * draft.grid.bars[i + 1].beat : beats.length;
		for (let beat = 2 * bar.beat; beat < next; beat += bar.beatsPerBar) bars.push({ ...bar, beat });
	});
	scalePositions(draft, (position) => 2 * position, 2);
	moveAnchors(draft, (anchor) => 2 * anchor);
	edited(draft, beats, bars);
}

/** Half as many beats, in as many beats to the bar, bar 1 kept where it is; everything keeps its place in the music. */
export function halveBeats(draft: DraftShow): void {
	requireBeats(draft, 4, "halving");
	const { beats: old, bars: oldBars } = draft.grid;
	const odd = oldBars.length > 0 ? oldBars[0].beat % 2 : 0;
	const beats = old.filter((_, i) => i % 2 === odd);
	const bars: Bar[] = [];
	for (const bar of oldBars) {
		const beat = (bar.beat - odd) / 2;
		const before = bars.length > 0 ? bars[bars.length - 1] : null;
		if (Number.isInteger(beat) && (before === null || beat - before.beat >= before.beatsPerBar))
			bars.push({ ...bar, beat });
	}
	scalePositions(draft, (position) => (position - odd) / 2, 0.5);
	moveAnchors(draft, (anchor) => (anchor - odd) / 2);
	edited(draft, beats, bars);
}

/**
 * From this beat on, bars of so many beats; the beat starts a bar.
 * @param until beat where the old bars go on; left out: to the end
 */
export function setMetre(draft: DraftShow, fromBeat: number, beatsPerBar: number, until?: number): void {
	const { beats, bars } = draft.grid;
	if (!Number.isInteger(beatsPerBar) || beatsPerBar < 1) {
		throw new StarstaveError("show", `A bar of ${beatsPerBar} beats can't be; it must be a whole number from 1.`);
	}
	const end = Math.min(until ?? beats.length, beats.length);
	const next: Bar[] = bars.filter((bar) => bar.beat < fromBeat).map((bar) => ({ ...bar }));
	for (let beat = fromBeat; beat < end; beat += beatsPerBar) next.push({ beat, beatsPerBar });
	for (const bar of bars) if (bar.beat >= end) next.push({ ...bar });
	edited(draft, beats, next);
}
