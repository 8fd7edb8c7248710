/** Pushes drones apart that come too near: projections onto the pairs' constraints (Kaczmarz's method, over-relaxed). */
import type { Approaches } from "./approaches.ts";
import { type Bends, leaveWeight, reachWeight } from "./bends.ts";

/** Over-relaxation of each projection. */
const RELAX = 1.3;
/** Share of the way at either end on which touching drones are parted by their slopes. */
const AT_END = 0.05;
/** Least of f² + g² that is divided by: nearer to an end a push moves next to nothing. */
const LEAST_WEIGHT = 0.0016;

/**
 * One pass over all approaches.
 * @param mobility N, above 0: the more, the more of a push a drone takes
 * @returns how many were nearer than `gap`
 */
export function separate(bends: Bends, near: Approaches, mobility: Float64Array, gap: number): number {
	const { start, way, leave, reach } = bends;
	let pushed = 0;
	for (let k = 0; k < near.count; k++) {
		const [i, j, s] = [near.first[k], near.second[k], near.at[k]];
		const [a, b] = [3 * i, 3 * j];
		const f = leaveWeight(s);
		const g = reachWeight(s);
		let [x, y, z] = [0, 0, 0];
		x = start[b] - start[a] + s * (way[b] - way[a]) + f * (leave[b] - leave[a]) + g * (reach[b] - reach[a]);
		const [a1, b1] = [a + 1, b + 1];
		y = start[b1] - start[a1] + s * (way[b1] - way[a1]) + f * (leave[b1] - leave[a1]) + g * (reach[b1] - reach[a1]);
		const [a2, b2] = [a + 2, b + 2];
		z = start[b2] - start[a2] + s * (way[b2] - way[a2]) + f * (leave[b2] - leave[a2]) + g * (reach[b2] - reach[a2]);
		let distance = Math.sqrt(x * x + y * y + z * z);
		if (distance >= gap) continue;
		pushed++;
		const [mi, mj] = [mobility[i], mobility[j]];
		if ((s < AT_END || s > 1 - AT_END) && turnAtEnd(bends, a, b, s < 0.5, mi, mj, gap)) continue;
		const need = Math.min(0.5 * gap, RELAX * (gap - distance) + 1e-5);
		if (distance < 1e-6) {
			// They meet head on: to a side that depends on their numbers alone.
			const angle = i * 2.399963 + j * 0.777;
			[x, y, z, distance] = [Math.cos(angle), Math.sin(angle), 0, 1];
		}
		const scale = need / (Math.max(LEAST_WEIGHT, f * f + g * g) * (mi + mj) * distance);
		push(bends, a, -scale * mi, f, g, x, y, z);
		push(bends, b, scale * mj, f, g, x, y, z);
	}
	return pushed;
}

function push({ leave, reach }: Bends, at: number, by: number, f: number, g: number, x: number, y: number, z: number) {
	leave[at] += by * f * x;
	leave[at + 1] += by * f * y;
	leave[at + 2] += by * f * z;
	reach[at] += by * g * x;
	reach[at + 1] += by * g * y;
	reach[at + 2] += by * g * z;
}

/**
 * Two drones that touch at an end and set out towards each other, u apart with the slope v: to second order |D|² has its
 * least, |u|² − (u·v)²/c with c half its curvature, so close to the end that the push needed there can't be told from one
 * half as large. So u·v itself is brought to what leaves the gap.
 * @returns whether that was broken
 */
function turnAtEnd(
	{ start, way, leave, reach }: Bends,
	a: number,
	b: number,
	departing: boolean,
	mi: number,
	mj: number,
	gap: number,
): boolean {
	const [bend, other] = departing ? [leave, reach] : [reach, leave];
	const sign = departing ? 1 : -1;
	let along = 0;
	let square = 0;
	let curve = 0;
	for (let axis = 0; axis < 3; axis++) {
		const w = way[b + axis] - way[a + axis];
		const u = start[b + axis] - start[a + axis] + (departing ? 0 : w);
		const p = bend[b + axis] - bend[a + axis];
		const v = sign * w + p;
		along += u * v;
		square += u * u;
		curve += v * v + 2 * u * (other[b + axis] - other[a + axis] - 2 * p);
	}
	if (square > 1.1 * gap * gap) return false;
	const least = -Math.sqrt(Math.max(0, curve) * Math.max(0, square - gap * gap));
	if (along >= least) return false;
	const scale = (RELAX * (least - along) + 1e-6) / (square * (mi + mj));
	for (let axis = 0; axis < 3; axis++) {
		const u = start[b + axis] - start[a + axis] + (departing ? 0 : way[b + axis] - way[a + axis]);
		bend[a + axis] -= mi * scale * u;
		bend[b + axis] += mj * scale * u;
	}
	return true;
}
