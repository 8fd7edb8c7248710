/**
 * Straight paths that come too near are bent apart: every drone gets a bump 4s(1−s)·p, and p is found by projecting the
 * pairs that break the spacing, one after the other, onto keeping it (Kaczmarz's method for the pairs' constraints, over-
 * relaxed). A bump has a slope at s = 0, so drones that touch at an end part too. What comes out is only a proposal: the
 * proof has the last word.
 */
import type { Paths } from "./polynomial-paths.ts";

export interface PartingOptions {
	/** Distance to come to, m in the measure of spacing: a little over the spacing. */
	readonly gap: number;
	readonly downwash: number;
	/** The fleet swells by this share of itself at half way before it is parted. */
	readonly swell: number;
	/** N, 0..1: how much time each drone has to spare; those with more go further out of the way. */
	readonly spare: Float64Array;
	readonly rounds: number;
}

/** Over-relaxation of each projection. */
const RELAX = 1.3;
/** Weight of the bump below which a push would be thrown away: near an end it moves nothing. */
const LEAST_WEIGHT = 0.06;
/** Rounds between two looks at which pairs may come near. */
const LOOK = 5;
/** A pair is kept in sight while it is nearer than this many gaps. */
const SIGHT = 1.6;

/**
 * @param from,to 3·N metres; @param target end slot of each row
 * @returns bent paths of degree 2, or null when the rounds are used up with pairs still too near
 */
export function partPaths(
	from: Float64Array,
	to: Float64Array,
	target: Int32Array,
	options: PartingOptions,
): Paths | null {
	const count = target.length;
	const { gap, downwash, spare } = options;
	// In the measure of spacing: start, way, bump; 3·N each.
	const start = new Float64Array(3 * count);
	const way = new Float64Array(3 * count);
	for (let i = 0; i < count; i++) {
		for (let axis = 0; axis < 3; axis++) {
			const scale = axis === 2 ? 1 / downwash : 1;
			start[3 * i + axis] = from[3 * i + axis] * scale;
			way[3 * i + axis] = to[3 * target[i] + axis] * scale - start[3 * i + axis];
		}
	}
	const bump = swellFrom(start, way, count, options.swell);
	let pairs: Int32Array = new Int32Array(0);
	for (let round = 0; round < options.rounds; round++) {
		const looked = round % LOOK === 0;
		if (looked) pairs = pairsInSight(start, way, bump, count, SIGHT * gap);
		let pushed = 0;
		for (let k = 0; k < pairs.length; k += 2) {
			if (pushApart(pairs[k], pairs[k + 1], start, way, bump, spare, gap)) pushed++;
		}
		if (pushed === 0) {
			if (looked) return bentPaths(from, to, target, bump, downwash);
			// Nothing in sight is too near: look again at once, since others may have come near meanwhile.
			round += LOOK - 1 - (round % LOOK);
		}
	}
	return null;
}

/** Every drone is moved away from the fleet's middle at half way. */
function swellFrom(start: Float64Array, way: Float64Array, count: number, swell: number): Float64Array {
	const bump = new Float64Array(3 * count);
	if (swell === 0) return bump;
	for (let axis = 0; axis < 3; axis++) {
		let middle = 0;
		for (let i = 0; i < count; i++) middle += (start[3 * i + axis] + way[3 * i + axis] / 2) / count;
		for (let i = 0; i < count; i++) {
			bump[3 * i + axis] = swell * (start[3 * i + axis] + way[3 * i + axis] / 2 - middle);
		}
	}
	return bump;
}

/** Moves two drones' bumps so that their nearest point keeps the gap. @returns whether they were too near */
function pushApart(
	i: number,
	j: number,
	start: Float64Array,
	way: Float64Array,
	bump: Float64Array,
	spare: Float64Array,
	gap: number,
): boolean {
	const [a, b] = [3 * i, 3 * j];
	const ux = start[b] - start[a];
	const uy = start[b + 1] - start[a + 1];
	const uz = start[b + 2] - start[a + 2];
	const vx = way[b] - way[a];
	const vy = way[b + 1] - way[a + 1];
	const vz = way[b + 2] - way[a + 2];
	const qx = bump[b] - bump[a];
	const qy = bump[b + 1] - bump[a + 1];
	const qz = bump[b + 2] - bump[a + 2];
	const squareAt = (s: number): number => {
		const f = 4 * s * (1 - s);
		const x = ux + s * vx + f * qx;
		const y = uy + s * vy + f * qy;
		const z = uz + s * vz + f * qz;
		return x * x + y * y + z * z;
	};
	let best = Number.POSITIVE_INFINITY;
	let at = 0;
	for (let k = 1; k < 16; k++) {
		const square = squareAt(k / 16);
		if (square < best) {
			best = square;
			at = k / 16;
		}
	}
	// Two steps of a parabola through three points bring s to about 1e-4.
	for (let step = 1 / 16, k = 0; k < 3; k++, step /= 5) {
		const [low, high] = [squareAt(Math.max(0, at - step)), squareAt(Math.min(1, at + step))];
		const bend = low - 2 * best + high;
		if (bend <= 0) break;
		const shifted = Math.min(1, Math.max(0, at + (0.5 * step * (low - high)) / bend));
		const square = squareAt(shifted);
		if (square < best) {
			best = square;
			at = shifted;
		}
	}
	if (best >= gap * gap) return false;
	const weight = Math.max(LEAST_WEIGHT, 4 * at * (1 - at));
	let x = ux + at * vx + weight * qx;
	let y = uy + at * vy + weight * qy;
	let z = uz + at * vz + weight * qz;
	let distance = Math.sqrt(x * x + y * y + z * z);
	if (distance < 1e-6) {
		// They meet head on: to a side that depends on their numbers alone.
		const angle = i * 2.399963 + j * 0.777;
		[x, y, z, distance] = [Math.cos(angle), Math.sin(angle), 0, 1];
	}
	const push = Math.min(0.5 * gap, (RELAX * (gap - Math.sqrt(best)) + 1e-5) / weight) / distance;
	const share = (spare[i] + 0.02) / (spare[i] + spare[j] + 0.04);
	bump[a] -= share * push * x;
	bump[a + 1] -= share * push * y;
	bump[a + 2] -= share * push * z;
	bump[b] += (1 - share) * push * x;
	bump[b + 1] += (1 - share) * push * y;
	bump[b + 2] += (1 - share) * push * z;
	return true;
}

/** Pairs that come nearer than `sight` at one of the instants looked at, as i0 j0 i1 j1 …, in order. */
function pairsInSight(
	start: Float64Array,
	way: Float64Array,
	bump: Float64Array,
	count: number,
	sight: number,
): Int32Array {
	let far = 0;
	for (let i = 0; i < count; i++) far = Math.max(far, Math.hypot(way[3 * i], way[3 * i + 1], way[3 * i + 2]));
	// Two drones close in by at most twice the longest way over an instant; half of what sight adds to the gap covers it.
	const instants = Math.min(96, Math.max(12, Math.ceil(far / (0.35 * sight))));
	const order = new Uint32Array(count);
	const points = new Float64Array(3 * count);
	const found = new Set<number>();
	const square = sight * sight;
	for (let k = 0; k <= instants; k++) {
		const s = k / instants;
		const f = 4 * s * (1 - s);
		for (let c = 0; c < points.length; c++) points[c] = start[c] + s * way[c] + f * bump[c];
		for (let i = 0; i < count; i++) order[i] = i;
		order.sort((p, q) => points[3 * p] - points[3 * q] || p - q);
		for (let m = 0; m < count; m++) {
			const i = order[m];
			for (let n = m + 1; n < count; n++) {
				const j = order[n];
				const dx = points[3 * j] - points[3 * i];
				if (dx >= sight) break;
				const dy = points[3 * j + 1] - points[3 * i + 1];
				const dz = points[3 * j + 2] - points[3 * i + 2];
				if (dx * dx + dy * dy + dz * dz < square) found.add(i < j ? i * count + j : j * count + i);
			}
		}
	}
	const keys = Float64Array.from(found).sort();
	const pairs = new Int32Array(2 * keys.length);
	keys.forEach((key, k) => {
		pairs[2 * k] = Math.floor(key / count);
		pairs[2 * k + 1] = key % count;
	});
	return pairs;
}

/** a + s(b − a) + 4s(1 − s)p, by powers of s, in metres. */
function bentPaths(
	from: Float64Array,
	to: Float64Array,
	target: Int32Array,
	bump: Float64Array,
	downwash: number,
): Paths {
	const coefficients = new Float64Array(9 * target.length);
	for (let i = 0; i < target.length; i++) {
		for (let axis = 0; axis < 3; axis++) {
			const p = bump[3 * i + axis] * (axis === 2 ? downwash : 1);
			const at = (3 * i + axis) * 3;
			coefficients[at] = from[3 * i + axis];
			coefficients[at + 1] = to[3 * target[i] + axis] - from[3 * i + axis] + 4 * p;
			coefficients[at + 2] = -4 * p;
		}
	}
	return { degree: 2, coefficients };
}
