/**
 * What the planner bends: every drone flies a + s(b − a) + s(1 − s)²·p + s²(1 − s)·q. p turns the departure, q the arrival:
 * each has a slope at its own end and none at the other, so drones that touch at both ends can be parted at either without
 * undoing the other. p = q is the plain bump s(1 − s)·p.
 */
import type { Paths } from "../paths/polynomial-paths.ts";

/** In the measure of spacing, 3·N each. */
export interface Bends {
	readonly start: Float64Array;
	readonly way: Float64Array;
	/** The p of each drone. */
	readonly leave: Float64Array;
	/** The q of each drone. */
	readonly reach: Float64Array;
}

/** Straight to begin with. @param from,to 3·N metres; @param target end slot of each row */
export function straightBends(from: Float64Array, to: Float64Array, target: Int32Array, downwash: number): Bends {
	const length = 3 * target.length;
	const start = new Float64Array(length);
	const way = new Float64Array(length);
	for (let i = 0; i < target.length; i++) {
		for (let axis = 0; axis < 3; axis++) {
			const scale = axis === 2 ? 1 / downwash : 1;
			start[3 * i + axis] = from[3 * i + axis] * scale;
			way[3 * i + axis] = to[3 * target[i] + axis] * scale - start[3 * i + axis];
		}
	}
	return { start, way, leave: new Float64Array(length), reach: new Float64Array(length) };
}

/** Weight of p at s. */
export const leaveWeight = (s: number): number => s * (1 - s) * (1 - s);
/** Weight of q at s. */
export const reachWeight = (s: number): number => s * s * (1 - s);

/** All drones at s, into `points` (3·N, measure of spacing). */
export function pointsAt(bends: Bends, s: number, points: Float64Array): void {
	const { start, way, leave, reach } = bends;
	const f = leaveWeight(s);
	const g = reachWeight(s);
	for (let c = 0; c < points.length; c++) points[c] = start[c] + s * way[c] + f * leave[c] + g * reach[c];
}

/** By powers of s, in metres, with the very ends that were asked for. */
export function bentPaths(
	from: Float64Array,
	to: Float64Array,
	target: Int32Array,
	bends: Bends,
	downwash: number,
): Paths {
	const coefficients = new Float64Array(12 * target.length);
	for (let i = 0; i < target.length; i++) {
		for (let axis = 0; axis < 3; axis++) {
			const scale = axis === 2 ? downwash : 1;
			const p = bends.leave[3 * i + axis] * scale;
			const q = bends.reach[3 * i + axis] * scale;
			const at = (3 * i + axis) * 4;
			coefficients[at] = from[3 * i + axis];
			coefficients[at + 1] = to[3 * target[i] + axis] - from[3 * i + axis] + p;
			coefficients[at + 2] = q - 2 * p;
			coefficients[at + 3] = p - q;
		}
	}
	return { degree: 3, coefficients };
}
