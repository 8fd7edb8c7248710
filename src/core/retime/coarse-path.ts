/**
 * What went where, roughly: the cheapest path through (new frame, old frame) with one more state, "not in the old one"
 * (Viterbi). A move on along the diagonal is free; half a frame more or less costs a little, which follows a change of
 * tempo; a jump to any other place costs a fixed sum and comes from the best state of all, one minimum a frame, so that
 * the whole is one pass over old × new. Continuity decides where music repeats itself.
 */
import type { AnchorPair } from "./edit-map.ts";
import type { FeatureTable } from "./listen.ts";

/** Costs, in units of one wholly unlike frame of a tenth of a second. */
const BEND = 0.25;
const JUMP = 3;
const ENTER_NEW = 0.5;
/** A frame that isn't in the old soundtrack. */
export const NOT_IN_OLD = 0.6;
/** Breaking a pair that the designer set. */
const BROKEN_ANCHOR = 100;
/** Old frames to either side of a set pair that still honour it. */
const ANCHOR_REACH = 6;
/** New frames are taken at half the old frames' rate. */
const STRIDE = 2;
const JUMPED = 3;

/** New frames i from `from` to `to` (at the coarse rate, `to` not among them) and the old frame each came from. */
export interface Run {
	/** Seconds in the new soundtrack. */
	readonly newTimes: Float64Array;
	/** Seconds in the old one. */
	readonly oldTimes: Float64Array;
}

/**
 * @returns runs of old music in the order of the new soundtrack; between two of them there is a jump or new music
 */
export function findRuns(
	old: FeatureTable,
	current: FeatureTable,
	anchors: readonly AnchorPair[] = [],
	onProgress?: (share: number) => void,
): Run[] {
	const steps = Math.ceil(current.frames / STRIDE);
	const width = old.frames;
	// From which of four ways each cell came; 3 is a jump, whose source is one a step.
	const ways = new Uint8Array(steps * width);
	const jumpFrom = new Int32Array(steps);
	const enteredNew = new Int32Array(steps);
	const pad = 3;
	let before = new Float64Array(width + pad).fill(Number.POSITIVE_INFINITY);
	let now = new Float64Array(width + pad).fill(Number.POSITIVE_INFINITY);
	const rows = createLikenessRows(old, current);
	let best = 0;
	let bestAt = -1;
	let outside = 0;
	for (let i = 0; i < steps; i++) {
		const like = rows(i);
		const away = anchorCost(anchors, i, old.rate, current.rate);
		const fromBest = best + JUMP;
		const fromOutside = outside + JUMP;
		const jump = i === 0 ? 0 : Math.min(fromBest, fromOutside);
		jumpFrom[i] = i === 0 || fromOutside < fromBest ? -1 : bestAt;
		let nextBest = Number.POSITIVE_INFINITY;
		let nextAt = -1;
		const row = i * width;
		for (let j = 0; j < width; j++) {
			let cost = before[j + pad - 2];
			let way = 1;
			const slow = before[j + pad - 1] + BEND;
			if (slow < cost) {
				cost = slow;
				way = 0;
			}
			const fast = before[j + pad - 3] + BEND;
			if (fast < cost) {
				cost = fast;
				way = 2;
			}
			if (jump < cost) {
				cost = jump;
				way = JUMPED;
			}
			cost += 1 - like[j];
			if (away !== null && Math.abs(j - away) > ANCHOR_REACH) cost += BROKEN_ANCHOR;
			now[j + pad] = cost;
			ways[row + j] = way;
			if (cost < nextBest) {
				nextBest = cost;
				nextAt = j;
			}
		}
		const entering = best + ENTER_NEW;
		enteredNew[i] = i > 0 && entering < outside ? bestAt : -1;
		outside = (i === 0 ? 0 : Math.min(outside, entering)) + NOT_IN_OLD + (away === null ? 0 : BROKEN_ANCHOR);
		best = nextBest;
		bestAt = nextAt;
		const swap = before;
		before = now;
		now = swap;
		if ((i & 127) === 0) onProgress?.(i / steps);
	}
	return walkBack(ways, jumpFrom, enteredNew, width, outside < best ? -1 : bestAt, steps, old.rate, current.rate);
}

function walkBack(
	ways: Uint8Array,
	jumpFrom: Int32Array,
	enteredNew: Int32Array,
	width: number,
	end: number,
	steps: number,
	oldRate: number,
	newRate: number,
): Run[] {
	const runs: Run[] = [];
	let news: number[] = [];
	let olds: number[] = [];
	const close = (): void => {
		if (news.length > 0) {
			runs.push({ newTimes: Float64Array.from(news.reverse()), oldTimes: Float64Array.from(olds.reverse()) });
		}
		news = [];
		olds = [];
	};
	let at = end;
	for (let i = steps - 1; i >= 0; i--) {
		if (at < 0) {
			at = enteredNew[i];
			continue;
		}
		news.push((i * STRIDE) / newRate);
		olds.push(at / oldRate);
		const way = ways[i * width + at];
		if (way === JUMPED) {
			close();
			at = jumpFrom[i];
		} else at -= way + 1;
	}
	close();
	return runs.reverse();
}

/** The old frame that a set pair asks for at step i, or null. */
function anchorCost(anchors: readonly AnchorPair[], step: number, oldRate: number, newRate: number): number | null {
	for (const anchor of anchors) {
		const off = (step * STRIDE) / newRate - anchor.new;
		if (Math.abs(off) <= 0.25) return (anchor.old + off) * oldRate;
	}
	return null;
}

/** Likeness of every old frame to the new frame of a step; four steps are made at once so that each value is read less. */
function createLikenessRows(old: FeatureTable, current: FeatureTable): (step: number) => Float32Array {
	const { dimensions } = old;
	const a = current.values;
	const b = old.values;
	const rows = Array.from({ length: 4 }, () => new Float32Array(old.frames));
	let made = -1;
	const last = current.frames - 1;
	const make = (block: number): void => {
		const base = (k: number): number => Math.min(last, (4 * block + k) * STRIDE) * dimensions;
		const [a0, a1, a2, a3] = [base(0), base(1), base(2), base(3)];
		const [r0, r1, r2, r3] = rows;
		let j = 0;
		for (; j + 1 < old.frames; j += 2) {
			const b0 = j * dimensions;
			const b1 = b0 + dimensions;
			let s00 = 0;
			let s10 = 0;
			let s20 = 0;
			let s30 = 0;
			let s01 = 0;
			let s11 = 0;
			let s21 = 0;
			let s31 = 0;
			for (let d = 0; d < dimensions; d++) {
				const x = b[b0 + d];
				const y = b[b1 + d];
				const p0 = a[a0 + d];
				const p1 = a[a1 + d];
				const p2 = a[a2 + d];
				const p3 = a[a3 + d];
				s00 += p0 * x;
				s10 += p1 * x;
				s20 += p2 * x;
				s30 += p3 * x;
				s01 += p0 * y;
				s11 += p1 * y;
				s21 += p2 * y;
				s31 += p3 * y;
			}
			r0[j] = s00;
			r1[j] = s10;
			r2[j] = s20;
			r3[j] = s30;
			r0[j + 1] = s01;
			r1[j + 1] = s11;
			r2[j + 1] = s21;
			r3[j + 1] = s31;
		}
		for (; j < old.frames; j++) {
			for (let k = 0; k < 4; k++) {
				let sum = 0;
				const from = base(k);
				for (let d = 0; d < dimensions; d++) sum += a[from + d] * b[j * dimensions + d];
				rows[k][j] = sum;
			}
		}
		made = block;
	};
	return (step) => {
		const block = step >> 2;
		if (block !== made) make(block);
		return rows[step & 3];
	};
}
