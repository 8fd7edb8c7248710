/** How hard each drone must fly on its bent path when the whole fleet shares a law of a given duration. */
import type { Limits } from "../../show/index.ts";
import type { TimeLaw } from "../plan.ts";
import type { Bends } from "./bends.ts";

/** Instants on each piece of the law. */
const INSTANTS = 4;
/** Derivatives 1 to 3 of what is flown are sums of way, leave and reach with these weights: 9 an instant. */
const WEIGHTS = 9;
/** Projections in one yielding. */
const YIELDS = 6;
/** Which axes a limit is on. */
const LEVEL = 0;
const UPRIGHT = 1;
const ALL = 2;

export interface Pace {
	/** The factor by which time would have to stretch for drone i to keep its limits in `duration` seconds. */
	haste(bends: Bends, i: number, duration: number): number;
	/**
	 * Bends drone i back towards keeping its limits, the one that it breaks most first (Kaczmarz's method on the
	 * linearised limit), as long as its haste falls.
	 * @returns its haste before
	 */
	yieldTo(bends: Bends, i: number, duration: number): number;
}

export function createPace(law: TimeLaw, limits: Limits, downwash: number): Pace {
	const lasts = law.borders[law.borders.length - 1];
	const table = weightsOf(law);
	// The worst of the drone last looked at: which derivative (1..3), at which instant, and on which axes.
	let [worstOrder, worstAt, worstAxes] = [1, 0, LEVEL];
	const kept = new Float64Array(6);

	function haste({ way, leave, reach }: Bends, i: number, duration: number): number {
		const [x, y, z] = [3 * i, 3 * i + 1, 3 * i + 2];
		const [wx, wy, wz] = [way[x], way[y], way[z] * downwash];
		const [px, py, pz] = [leave[x], leave[y], leave[z] * downwash];
		const [qx, qy, qz] = [reach[x], reach[y], reach[z] * downwash];
		let [level, up, down, push, jolt] = [0, 0, 0, 0, 0];
		let [levelAt, upAt, downAt, pushAt, joltAt] = [0, 0, 0, 0, 0];
		for (let k = 0; k < table.length; k += WEIGHTS) {
			let [a, b, c] = [table[k], table[k + 1], table[k + 2]];
			let [dx, dy] = [a * wx + b * px + c * qx, a * wy + b * py + c * qy];
			let dz = a * wz + b * pz + c * qz;
			if (dz > up) [up, upAt] = [dz, k];
			if (-dz > down) [down, downAt] = [-dz, k];
			let size = dx * dx + dy * dy;
			if (size > level) [level, levelAt] = [size, k];
			[a, b, c] = [table[k + 3], table[k + 4], table[k + 5]];
			[dx, dy, dz] = [a * wx + b * px + c * qx, a * wy + b * py + c * qy, a * wz + b * pz + c * qz];
			size = dx * dx + dy * dy + dz * dz;
			if (size > push) [push, pushAt] = [size, k + 3];
			[a, b, c] = [table[k + 6], table[k + 7], table[k + 8]];
			[dx, dy, dz] = [a * wx + b * px + c * qx, a * wy + b * py + c * qy, a * wz + b * pz + c * qz];
			size = dx * dx + dy * dy + dz * dz;
			if (size > jolt) [jolt, joltAt] = [size, k + 6];
		}
		let most = Math.sqrt(level) / limits.horizontal;
		[worstOrder, worstAt, worstAxes] = [1, levelAt, LEVEL];
		if (up / limits.climb > most) [most, worstAt, worstAxes] = [up / limits.climb, upAt, UPRIGHT];
		if (down / limits.descent > most) [most, worstAt, worstAxes] = [down / limits.descent, downAt, UPRIGHT];
		const pushed = Math.sqrt(Math.sqrt(push) / limits.acceleration);
		if (pushed > most) [most, worstOrder, worstAt, worstAxes] = [pushed, 2, pushAt, ALL];
		const jolted = Math.cbrt(Math.sqrt(jolt) / limits.jerk);
		if (jolted > most) [most, worstOrder, worstAt, worstAxes] = [jolted, 3, joltAt, ALL];
		return (most * lasts) / duration;
	}

	function yieldTo(bends: Bends, i: number, duration: number): number {
		const { way, leave, reach } = bends;
		const before = haste(bends, i, duration);
		let now = before;
		let step = 1;
		for (let k = 0; k < YIELDS && now > 1 && step > 0.1; k++) {
			const [a, b, c] = [table[worstAt], table[worstAt + 1], table[worstAt + 2]];
			const square = b * b + c * c;
			if (square < 1e-12 * a * a) break;
			kept.set(leave.subarray(3 * i, 3 * i + 3), 0);
			kept.set(reach.subarray(3 * i, 3 * i + 3), 3);
			// The derivative of that order is to shrink to 1/haste^order of itself.
			const share = (step * (1 - 1 / now ** worstOrder)) / square;
			for (let axis = 0; axis < 3; axis++) {
				if ((axis === 2 && worstAxes === LEVEL) || (axis < 2 && worstAxes === UPRIGHT)) continue;
				const at = 3 * i + axis;
				const value = a * way[at] + b * leave[at] + c * reach[at];
				leave[at] -= share * b * value;
				reach[at] -= share * c * value;
			}
			const next = haste(bends, i, duration);
			if (next < now) {
				now = next;
				continue;
			}
			// Another limit would hold it up more: back, and a smaller step.
			leave.set(kept.subarray(0, 3), 3 * i);
			reach.set(kept.subarray(3, 6), 3 * i);
			step /= 3;
			haste(bends, i, duration);
		}
		return before;
	}
	return { haste, yieldTo };
}

function weightsOf(law: TimeLaw): Float64Array {
	const weights: number[] = [];
	for (let p = 0; p + 1 < law.borders.length; p++) {
		const c = law.coefficients.subarray(6 * p, 6 * p + 6);
		for (let k = p === 0 ? 0 : 1; k <= INSTANTS; k++) {
			const t = ((law.borders[p + 1] - law.borders[p]) * k) / INSTANTS;
			const s = c[0] + t * (c[1] + t * (c[2] + t * (c[3] + t * (c[4] + t * c[5]))));
			const s1 = c[1] + t * (2 * c[2] + t * (3 * c[3] + t * (4 * c[4] + t * 5 * c[5])));
			const s2 = 2 * c[2] + t * (6 * c[3] + t * (12 * c[4] + t * 20 * c[5]));
			const s3 = 6 * c[3] + t * (24 * c[4] + t * 60 * c[5]);
			// Derivatives by s of s(1 − s)² and of s²(1 − s).
			const f = [1 - 4 * s + 3 * s * s, -4 + 6 * s, 6];
			const g = [2 * s - 3 * s * s, 2 - 6 * s, -6];
			const third = (d: readonly number[]): number => d[2] * s1 ** 3 + 3 * d[1] * s1 * s2 + d[0] * s3;
			weights.push(s1, f[0] * s1, g[0] * s1);
			weights.push(s2, f[1] * s1 * s1 + f[0] * s2, g[1] * s1 * s1 + g[0] * s2);
			weights.push(s3, third(f), third(g));
		}
	}
	return Float64Array.from(weights);
}
