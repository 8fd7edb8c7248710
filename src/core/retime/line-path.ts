/**
 * Which line holds when: the cheapest path over new frames of 10 ms through few states, the lines found and "not in the
 * old one" (Viterbi again, on exact lines this time, so that joints come out to a frame).
 */
import { NOT_IN_OLD } from "./coarse-path.ts";
import type { AnchorPair } from "./edit-map.ts";
import { type Line, oldOn } from "./line.ts";
import { type FeatureTable, FINE_RATE, QUIET } from "./listen.ts";

/** Costs in units of one wholly unlike tenth of a second, as on the coarse path. */
const FRAME = 10 / FINE_RATE;
const CHANGE = 3;
const ENTER_NEW = 0.5;
/** Seconds that a line may stray from a pair that the designer set and still honour it. */
const ANCHOR_REACH = 0.12;
/** Seconds to either side of a set pair in which its line must hold. */
const ANCHOR_HOLDS = 0.25;

/** A stretch of new frames on one line; `line` is −1 where nothing of the old soundtrack is heard. */
export interface Segment {
	readonly line: number;
	/** Frames at FINE_RATE; `to` isn't among them. */
	readonly from: number;
	readonly to: number;
	/**
	 * Evidence for the line: seconds in which something is heard, each times its likeness over what chance reaches.
	 * A minute of the same music gives some 30, of other music by chance next to nothing.
	 */
	readonly evidence: number;
	/** Seconds in which something is heard. */
	readonly heard: number;
}

/** Likeness that other music of the same kind reaches over a few seconds, found by looking for it. */
const BY_CHANCE = 0.4;

/** Cost of each line at each new frame: lines × frames; infinite where the line leaves the old soundtrack. */
export interface LineCosts {
	readonly frames: number;
	readonly values: Float32Array;
	/** One a new frame, as `Heard` has them. */
	readonly levels: Float32Array;
}

export function lineCosts(
	old: FeatureTable,
	current: FeatureTable,
	levels: Float32Array,
	lines: readonly Line[],
): LineCosts {
	const { frames, dimensions } = current;
	const values = new Float32Array(lines.length * frames);
	lines.forEach((line, k) => {
		for (let f = 0; f < frames; f++) {
			const from = Math.round(oldOn(line, f / FINE_RATE) * FINE_RATE);
			if (from < 0 || from >= old.frames) {
				values[k * frames + f] = Number.POSITIVE_INFINITY;
				continue;
			}
			const a = f * dimensions;
			const b = from * dimensions;
			let sum = 0;
			for (let d = 0; d < dimensions; d++) sum += current.values[a + d] * old.values[b + d];
			values[k * frames + f] = FRAME * (1 - sum);
		}
	});
	return { frames, values, levels };
}

export function findSegments(costs: LineCosts, lines: readonly Line[], anchors: readonly AnchorPair[] = []): Segment[] {
	const { frames, values } = costs;
	const states = lines.length + 1;
	const outside = lines.length;
	const changed = new Uint8Array(frames * states);
	const bestFrom = new Int16Array(frames);
	let before = new Float64Array(states);
	let now = new Float64Array(states);
	for (let f = 0; f < frames; f++) {
		let best = 0;
		for (let k = 1; k < states; k++) if (before[k] < before[best]) best = k;
		bestFrom[f] = best;
		const forced = forcedLines(lines, anchors, f);
		for (let k = 0; k < states; k++) {
			const change = before[best] + (k === outside ? ENTER_NEW : CHANGE);
			const leaves = f > 0 && change < before[k];
			now[k] = (leaves ? change : before[k]) + (k === outside ? FRAME * NOT_IN_OLD : values[k * frames + f]);
			if (forced !== null && !forced[k]) now[k] += 100;
			changed[f * states + k] = leaves ? 1 : 0;
		}
		const swap = before;
		before = now;
		now = swap;
	}
	let at = 0;
	for (let k = 1; k < states; k++) if (before[k] < before[at]) at = k;
	const segments: Segment[] = [];
	let to = frames;
	for (let f = frames - 1; f >= 0; f--) {
		if (f > 0 && changed[f * states + at] === 0) continue;
		segments.push(segmentOf(costs, at === outside ? -1 : at, f, to));
		to = f;
		at = bestFrom[f];
	}
	return segments.reverse();
}

export function segmentOf(costs: LineCosts, line: number, from: number, to: number): Segment {
	let evidence = 0;
	let heard = 0;
	for (let f = from; line >= 0 && f < to; f++) {
		if (costs.levels[f] < QUIET) continue;
		heard += 1 / FINE_RATE;
		evidence += (1 - costs.values[line * costs.frames + f] / FRAME - BY_CHANCE) / FINE_RATE;
	}
	return { line, from, to, evidence, heard };
}

/** Which states a set pair allows at this frame, or null where none is set. */
function forcedLines(lines: readonly Line[], anchors: readonly AnchorPair[], frame: number): boolean[] | null {
	const time = frame / FINE_RATE;
	for (const anchor of anchors) {
		if (Math.abs(time - anchor.new) > ANCHOR_HOLDS) continue;
		return [...lines.map((line) => Math.abs(oldOn(line, anchor.new) - anchor.old) <= ANCHOR_REACH), false];
	}
	return null;
}
