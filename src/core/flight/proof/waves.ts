/**
 * The gap of a leg on which drones leave at different times (climbing in waves off a grid denser than the spacing, and
 * down to it). All paths of such a leg are straight up or down, so the horizontal offset of a pair is constant and only
 * the difference of two heights over time matters. On the ground, below 1 m, only the grid's own pitch counts.
 */
import { bernsteinMatrix, halve } from "../../maths/index.ts";
import type { TimeLaw } from "../plan.ts";

/** Metres: below this a drone counts as on the ground. */
export const GROUND_HEIGHT = 1;

export interface WaveGap {
	readonly distance: number;
	/** Seconds from the departure of the first wave. */
	readonly time: number;
	readonly drones: readonly [number, number];
}

const LAW_WIDTH = 6;
const NARROW = 1e-9;

/**
 * @param paths N × 3 × 2 coefficients: straight, x and y constant
 * @param delays N: seconds each waits
 * @returns the smallest gap of pairs of which both are above 1 m; Infinity where no pair ever is
 */
export function smallestWaveGap(
	paths: Float64Array,
	delays: Float64Array,
	law: TimeLaw,
	downwash: number,
	radius: number,
): WaveGap {
	const count = delays.length;
	const order = Int32Array.from({ length: count }, (_, i) => i).sort((i, j) => paths[6 * i] - paths[6 * j] || i - j);
	let best: WaveGap = { distance: Infinity, time: 0, drones: [0, 1] };
	// Pairs with the same offset, heights and delays have the same gap: a wave is judged once for each kind of pair.
	const seen = new Set<string>();
	for (let m = 0; m < count; m++) {
		const i = order[m];
		for (let n = m + 1; n < count; n++) {
			const j = order[n];
			const dx = paths[6 * j] - paths[6 * i];
			if (dx >= radius) break;
			const dy = paths[6 * j + 2] - paths[6 * i + 2];
			const level = dx * dx + dy * dy;
			if (level >= radius * radius || level >= best.distance * best.distance) continue;
			const heights = [paths[6 * i + 4], paths[6 * i + 5], paths[6 * j + 4], paths[6 * j + 5]];
			const kind = [Math.round(level * 1e6), ...heights, delays[i], delays[j]].join();
			if (seen.has(kind)) continue;
			seen.add(kind);
			const gap = pairGap(heights, delays[i], delays[j], law, level, downwash, best.distance);
			if (gap.distance < best.distance) {
				best = { distance: gap.distance, time: gap.time, drones: [Math.min(i, j), Math.max(i, j)] };
			}
		}
	}
	return best;
}

function pairGap(
	heights: readonly number[],
	delayI: number,
	delayJ: number,
	law: TimeLaw,
	level: number,
	downwash: number,
	known: number,
): { distance: number; time: number } {
	const last = law.borders[law.borders.length - 1];
	const borders = new Set<number>();
	for (const border of law.borders) {
		borders.add(border + delayI);
		borders.add(border + delayJ);
	}
	const times = [...borders].sort((a, b) => a - b);
	let distance = known;
	let time = 0;
	for (let k = 0; k + 1 < times.length; k++) {
		const span = times[k + 1] - times[k];
		if (span <= 1e-12) continue;
		const si = lawOn(law, times[k] - delayI, span, last);
		const sj = lawOn(law, times[k] - delayJ, span, last);
		const zi = si.map((s) => heights[0] + heights[1] * s);
		const zj = sj.map((s) => heights[2] + heights[3] * s);
		const stack = [{ zi: Float64Array.from(zi), zj: Float64Array.from(zj), from: times[k], span }];
		while (stack.length > 0) {
			const part = stack.pop();
			if (part === undefined) break;
			// One of the two is on the ground all the while: the grid's pitch is all that counts.
			if (Math.max(...part.zi) <= GROUND_HEIGHT || Math.max(...part.zj) <= GROUND_HEIGHT) continue;
			const difference = part.zi.map((z, m) => (z - part.zj[m]) / downwash);
			const low = Math.min(...difference);
			const high = Math.max(...difference);
			const closest = low > 0 ? low : high < 0 ? -high : 0;
			const bound = Math.sqrt(level + closest * closest);
			if (bound >= distance * (1 - NARROW)) continue;
			// Both ends: where two drones close in steadily, the far end is the closest and settles the rest at once.
			for (const end of [0, LAW_WIDTH - 1]) {
				if (part.zi[end] <= GROUND_HEIGHT || part.zj[end] <= GROUND_HEIGHT) continue;
				const here = Math.sqrt(level + difference[end] * difference[end]);
				if (here < distance) {
					distance = here;
					time = end === 0 ? part.from : part.from + part.span;
				}
			}
			if (part.span < 1e-9) {
				if (bound < distance) {
					distance = bound;
					time = part.from;
				}
				continue;
			}
			const left = {
				zi: new Float64Array(LAW_WIDTH),
				zj: new Float64Array(LAW_WIDTH),
				from: part.from,
				span: part.span / 2,
			};
			const right = {
				zi: new Float64Array(LAW_WIDTH),
				zj: new Float64Array(LAW_WIDTH),
				from: part.from + part.span / 2,
				span: part.span / 2,
			};
			halve(part.zi, 0, LAW_WIDTH - 1, left.zi, right.zi, 0);
			halve(part.zj, 0, LAW_WIDTH - 1, left.zj, right.zj, 0);
			stack.push(right, left);
		}
	}
	return { distance, time };
}

/** Bernstein coefficients of s on [start, start + span] of the law's own time, which lies within one piece. */
function lawOn(law: TimeLaw, start: number, span: number, last: number): number[] {
	const middle = start + span / 2;
	if (middle <= 0) return new Array<number>(LAW_WIDTH).fill(0);
	if (middle >= last) return new Array<number>(LAW_WIDTH).fill(1);
	let piece = 0;
	while (middle >= law.borders[piece + 1]) piece++;
	const low = start - law.borders[piece];
	const matrix = bernsteinMatrix(LAW_WIDTH - 1, low, low + span);
	const values: number[] = [];
	for (let row = 0; row < LAW_WIDTH; row++) {
		let value = 0;
		for (let k = 0; k < LAW_WIDTH; k++) value += matrix[row * LAW_WIDTH + k] * law.coefficients[piece * LAW_WIDTH + k];
		values.push(value);
	}
	return values;
}
