import type { TimeLaw } from "../plan.ts";

/** A stretch of constant jerk: seconds, and 1/s³. */
export interface Phase {
	readonly length: number;
	readonly jerk: number;
}

/** Strings phases of constant jerk together from rest at s = 0, scaled so that it ends at 1 in float64 too. */
export function lawOfPhases(phases: readonly Phase[]): TimeLaw {
	let total = 0;
	for (const { length } of phases) total += Math.max(0, length);
	const kept = phases.filter(({ length }) => length > total * 1e-12);
	const borders = new Float64Array(kept.length + 1);
	const coefficients = new Float64Array(kept.length * 6);
	let s = 0;
	let speed = 0;
	let acceleration = 0;
	for (let p = 0; p < kept.length; p++) {
		const { length, jerk } = kept[p];
		borders[p + 1] = borders[p] + length;
		coefficients.set([s, speed, acceleration / 2, jerk / 6], p * 6);
		s += length * (speed + length * (acceleration / 2 + (length * jerk) / 6));
		speed += length * (acceleration + (length * jerk) / 2);
		acceleration += length * jerk;
	}
	for (let k = 0; k < coefficients.length; k++) coefficients[k] /= s;
	return { kind: "s-curve", borders, coefficients };
}
