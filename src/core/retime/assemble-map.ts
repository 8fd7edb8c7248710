/** From carried pieces to the whole map: what no piece covers on the old side was cut, on the new side put in. */
import type { EditMap, Joint, Stretch } from "./edit-map.ts";
import { type Line, oldOn } from "./line.ts";

/** Rises whenever the same samples would give another map. */
const MAP_VERSION = 1;
/** Seconds: less than this at an end is a codec's padding or the last bits of a joint, not an edit. */
const TRIFLE = 0.02;

/** A stretch of new seconds on one line. */
export interface Piece {
	readonly newFrom: number;
	readonly newTo: number;
	readonly line: Line;
	readonly confidence: number;
	readonly exact: boolean;
}

export function assembleMap(
	durations: { readonly oldDuration: number; readonly newDuration: number },
	verdict: EditMap["verdict"],
	pieces: readonly Piece[],
	joints: readonly Joint[],
	notes: readonly string[],
): EditMap {
	const carried: Stretch[] = pieces.map(({ newFrom, newTo, line, confidence, exact }) => ({
		kind: line.rate === 1 ? "kept" : "stretched",
		old: [oldOn(line, newFrom), oldOn(line, newTo)],
		new: [newFrom, newTo],
		rate: line.rate,
		confidence,
		exact,
	}));
	return mapOfCarried(durations, verdict, carried, joints, notes);
}

/** The whole map of its carried stretches, which lie one after another in the new soundtrack. */
export function mapOfCarried(
	durations: { readonly oldDuration: number; readonly newDuration: number },
	verdict: EditMap["verdict"],
	carried: readonly Stretch[],
	joints: readonly Joint[],
	notes: readonly string[],
): EditMap {
	const { oldDuration, newDuration } = durations;
	const all: Stretch[] = [...carried];
	for (const [from, to] of gaps(
		carried.map((stretch) => stretch.new),
		newDuration,
	)) {
		const before = carried.findLast((stretch) => stretch.new[1] <= from + TRIFLE);
		const at = before === undefined ? 0 : before.old[1];
		all.push({ kind: "inserted", old: [at, at], new: [from, to], rate: null, confidence: 1, exact: false });
	}
	for (const [from, to] of gaps(
		carried.map((stretch) => stretch.old),
		oldDuration,
	)) {
		const at = placeOfCut(carried, from, to, newDuration);
		all.push({ kind: "cut", old: [from, to], new: [at, at], rate: null, confidence: 1, exact: false });
	}
	// At one place: what was cut stands before what came after it.
	const rank = (stretch: Stretch): number => (stretch.kind === "cut" ? 0 : stretch.kind === "inserted" ? 1 : 2);
	all.sort((a, b) => a.new[0] - b.new[0] || rank(a) - rank(b) || a.old[0] - b.old[0]);
	return { version: MAP_VERSION, verdict, ...durations, stretches: all, joints, notes };
}

/** What the ranges leave of 0 … end, but for trifles. */
function gaps(ranges: readonly (readonly [number, number])[], end: number): [number, number][] {
	const sorted = [...ranges].sort((a, b) => a[0] - b[0]);
	const open: [number, number][] = [];
	let at = 0;
	for (const [from, to] of sorted) {
		if (from - at > TRIFLE) open.push([at, from]);
		at = Math.max(at, to);
	}
	if (end - at > TRIFLE) open.push([at, end]);
	return open;
}

/** Where the music that was cut would have been: after the stretch that led up to it, else before the one after it. */
function placeOfCut(carried: readonly Stretch[], from: number, to: number, newDuration: number): number {
	const before = carried.find((stretch) => Math.abs(stretch.old[1] - from) <= 2 * TRIFLE);
	if (before !== undefined) return before.new[1];
	const after = carried.find((stretch) => Math.abs(stretch.old[0] - to) <= 2 * TRIFLE);
	return after === undefined ? newDuration : after.new[0];
}
