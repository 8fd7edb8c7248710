import type { Box } from "../../show/index.ts";
import type { Paths } from "./polynomial-paths.ts";

/**
 * Paths that keep every gap whatever the formations: (1 − s²)·a + s(2 − s)·b + (1 − α − β)·c. With the least sum of
 * squares u·w ≥ 0 for every two drones (u, w their offsets at start and end: else swapping were cheaper), so
 * |αu + βw|² ≥ α²|u|² + β²|w|² ≥ (α² + β²)·d², and α² + β² = 1 + 2s²(1 − s)² ≥ 1.
 * The fleet swells to 1.5 × about c at half way; c is common to all, so it moves no gap. Each axis takes the c that
 * keeps the swell inside the volume, nearest to the middle of both formations.
 */
export function guaranteedPaths(from: Float64Array, to: Float64Array, target: Int32Array, volume: Box): Paths {
	const count = target.length;
	const coefficients = new Float64Array(count * 9);
	for (let axis = 0; axis < 3; axis++) {
		const c = centreInside(from, to, target, axis, volume.min[axis], volume.max[axis]);
		for (let i = 0; i < count; i++) {
			const a = from[3 * i + axis];
			const b = to[3 * target[i] + axis];
			// α a + β b + (2s² − 2s) c, by powers of s.
			const start = (3 * i + axis) * 3;
			coefficients[start] = a;
			coefficients[start + 1] = 2 * (b - c);
			coefficients[start + 2] = 2 * c - a - b;
		}
	}
	return { degree: 2, coefficients };
}

/** The c nearest to the middle for which no drone leaves [low, high]; where there is none, the middle of what is asked. */
function centreInside(
	from: Float64Array,
	to: Float64Array,
	target: Int32Array,
	axis: number,
	low: number,
	high: number,
): number {
	let sum = 0;
	let least = -Infinity;
	let most = Infinity;
	for (let i = 0; i < target.length; i++) {
		const a = from[3 * i + axis];
		const b = to[3 * target[i] + axis];
		sum += a + b;
		// At each s: low ≤ αa + βb − 2s(1 − s)c ≤ high, sampled finely; the proof has the last word.
		for (let k = 1; k < 16; k++) {
			const s = k / 16;
			const base = (1 - s * s) * a + s * (2 - s) * b;
			const weight = 2 * s * (1 - s);
			least = Math.max(least, (base - high) / weight);
			most = Math.min(most, (base - low) / weight);
		}
	}
	const middle = sum / (2 * Math.max(1, target.length));
	if (least > most) return (least + most) / 2;
	return Math.min(most, Math.max(least, middle));
}
