import type { Assignment } from "./assign/assign.ts";
import type { Allowed } from "./assign/sparse-arcs.ts";
import { sCurveTime } from "./law/straight-time.ts";
import type { LegProblem } from "./leg-problem.ts";

/** Shares over the bound that a shared law is tried at, and how many shapes of it. */
const SHARED = [1.015, 1.03, 1.05, 1.09];
const SHAPES = 9;

/**
 * On one law a climb that needs speed and a long flight that needs acceleration hold each other up, though each alone is
 * within the cap. So flights are held to what one law of a given duration allows: all those that it is fast enough for and
 * not too brisk for; from a law that cruises most of the way to one that never does.
 * @param bound s, straight-line bound; @param solve the cheapest assignment among what is allowed
 * @returns the first that exists, with its share over the bound; null when there is none
 */
export function withinSharedLaw(
	{ from, to, limits }: LegProblem,
	bound: number,
	solve: (allowed: Allowed) => Assignment | null,
): { assignment: Assignment; share: number } | null {
	const count = from.length / 3;
	for (const share of SHARED) {
		const time = share * bound;
		for (let k = 0; k < SHAPES; k++) {
			// Top rate of s: 1/T would never stop to accelerate, 2/T never cruise.
			const speed = (1.1 + (0.85 * k) / (SHAPES - 1)) / time;
			let [low, high] = [1e-6, 1e6];
			const jolt = limits.jerk / limits.acceleration;
			for (let step = 0; step < 60; step++) {
				const middle = Math.sqrt(low * high);
				if (sCurveTime(1, { speed, acceleration: middle, jerk: middle * jolt }) > time) low = middle;
				else high = middle;
			}
			if (high > 1e5) continue;
			const far = limits.acceleration / high;
			const allowed: Allowed = (i, j) => {
				const [x, y, z] = [to[3 * j] - from[3 * i], to[3 * j + 1] - from[3 * i + 1], to[3 * j + 2] - from[3 * i + 2]];
				const level = x * x + y * y;
				return (
					level + z * z <= far * far &&
					level * speed * speed <= limits.horizontal * limits.horizontal &&
					z * speed <= limits.climb &&
					-z * speed <= limits.descent
				);
			};
			if (!everyoneHasOne(count, allowed)) continue;
			const found = solve(allowed);
			if (found !== null) return { assignment: found, share };
		}
	}
	return null;
}

function everyoneHasOne(count: number, allowed: Allowed): boolean {
	const columns = new Uint8Array(count);
	for (let i = 0; i < count; i++) {
		let any = false;
		for (let j = 0; j < count; j++) {
			if (!allowed(i, j)) continue;
			any = true;
			columns[j] = 1;
		}
		if (!any) return false;
	}
	return columns.every((column) => column === 1);
}
