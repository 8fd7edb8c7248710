import type { Grid } from "../show/index.ts";
import { DOUBTFUL } from "./analyse.ts";
import type { Analysis } from "./analysis.ts";

/** Seconds within which a beat of the grid is the one that was heard: what was moved or tapped is no longer. */
const SAME = 0.0005;

/**
 * Beats of a grid that want listening to: those that stand where the analysis put them without being sure. A beat that
 * was set by hand, tapped, or followed its neighbour is taken as heard.
 * @returns indices into the grid's beats, rising
 */
export function doubtfulBeats(
	grid: Pick<Grid, "beats" | "anchors">,
	heard: Pick<Analysis, "beats" | "beatConfidence">,
): number[] {
	const held = new Set(grid.anchors ?? []);
	const doubtful: number[] = [];
	let k = 0;
	grid.beats.forEach((time, beat) => {
		while (k < heard.beats.length && heard.beats[k] < time - SAME) k++;
		const isHeard = k < heard.beats.length && heard.beats[k] <= time + SAME;
		if (isHeard && heard.beatConfidence[k] < DOUBTFUL && !held.has(beat)) doubtful.push(beat);
	});
	return doubtful;
}

/** Seconds at which each stretch of doubtful beats begins. */
export function doubtfulPlaces(
	grid: Pick<Grid, "beats" | "anchors">,
	heard: Pick<Analysis, "beats" | "beatConfidence">,
): number[] {
	const doubtful = doubtfulBeats(grid, heard);
	return doubtful.filter((beat, k) => beat - 1 !== doubtful[k - 1]).map((beat) => grid.beats[beat]);
}
