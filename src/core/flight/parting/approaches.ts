/** Where drones come nearest to one another on the way. */
import { type Bends, leaveWeight, pointsAt, reachWeight } from "./bends.ts";
import { createCells } from "./cells.ts";

/** Approach k: drones first[k] < second[k] are nearest at s = at[k], distance[k] apart. A pair may have several. */
export interface Approaches {
	count: number;
	first: Int32Array;
	second: Int32Array;
	at: Float64Array;
	/** In the measure of spacing. */
	distance: Float64Array;
}

export interface Lookout {
	/** All approaches under `within`, from scratch. */
	look(within: number): Approaches;
	/** From now on looks at twice as many instants. @returns false where it can't look more closely */
	sharpen(): boolean;
	/** The same approaches after the bends have changed a little. */
	follow(): void;
}

/** Two drones are looked at when an instant finds them nearer than this many gaps. */
const SIGHT = 1.6;
const FEWEST_INSTANTS = 16;
const MOST_INSTANTS = 96;
const SHARPEST = 256;
/** Steps of Newton's method towards the nearest point. */
const STEPS = 3;

/** @param gap distance to be kept, measure of spacing; @param bends are read anew at each call */
export function createLookout(bends: Bends, gap: number): Lookout {
	const count = bends.start.length / 3;
	let far = 0;
	for (let i = 0; i < count; i++) {
		far = Math.max(far, Math.hypot(bends.way[3 * i], bends.way[3 * i + 1], bends.way[3 * i + 2]));
	}
	// Two drones that close in by r between instants are seen nearer than √(gap² + r²/4) at one of them.
	let instants = Math.min(MOST_INSTANTS, Math.max(FEWEST_INSTANTS, Math.ceil(far / (1.5 * gap))));
	let points = rows(instants + 1, 3 * count);
	const cells = createCells(count);
	const found: Approaches = {
		count: 0,
		first: new Int32Array(4 * count),
		second: new Int32Array(4 * count),
		at: new Float64Array(4 * count),
		distance: new Float64Array(4 * count),
	};
	const nearest = { at: 0, distance: 0 };
	let bound = 0;

	const take = (i: number, j: number, from: number): void => {
		descend(bends, i, j, from, 1 / instants, nearest);
		// An end itself can't be bent.
		if (nearest.distance >= bound || nearest.at <= 0 || nearest.at >= 1) return;
		if (found.count === found.first.length) grow(found);
		const k = found.count++;
		found.first[k] = Math.min(i, j);
		found.second[k] = Math.max(i, j);
		found.at[k] = nearest.at;
		found.distance[k] = nearest.distance;
	};

	function look(within: number): Approaches {
		bound = within;
		found.count = 0;
		for (let k = 0; k <= instants; k++) pointsAt(bends, k / instants, points[k]);
		for (let k = 0; k <= instants; k++) {
			const here = points[k];
			const before = points[Math.max(0, k - 1)];
			const after = points[Math.min(instants, k + 1)];
			cells.pairs(here, SIGHT * gap, (i, j) => {
				const now = squareOf(here, i, j);
				// At an end: only where they set out towards each other.
				if (k === 0) {
					take(i, j, closing(bends, i, j, 0) < 0 ? 0 : 0.5 / instants);
				} else if (k === instants) {
					take(i, j, closing(bends, i, j, 1) > 0 ? 1 : 1 - 0.5 / instants);
				} else if (now <= squareOf(before, i, j) && now < squareOf(after, i, j)) take(i, j, k / instants);
			});
		}
		return found;
	}

	function follow(): void {
		for (let k = 0; k < found.count; k++) {
			descend(bends, found.first[k], found.second[k], found.at[k], 1 / instants, nearest);
			found.at[k] = nearest.at;
			found.distance[k] = nearest.distance;
		}
	}
	function sharpen(): boolean {
		if (instants >= SHARPEST) return false;
		instants *= 2;
		points = rows(instants + 1, 3 * count);
		return true;
	}
	return { look, sharpen, follow };
}

const rows = (many: number, length: number): Float64Array[] =>
	Array.from({ length: many }, () => new Float64Array(length));

function squareOf(points: Float64Array, i: number, j: number): number {
	const x = points[3 * j] - points[3 * i];
	const y = points[3 * j + 1] - points[3 * i + 1];
	const z = points[3 * j + 2] - points[3 * i + 2];
	return x * x + y * y + z * z;
}

/** Half the slope of |D|² at an end. */
function closing({ start, way, leave, reach }: Bends, i: number, j: number, end: 0 | 1): number {
	let slope = 0;
	for (let axis = 0; axis < 3; axis++) {
		const [a, b] = [3 * i + axis, 3 * j + axis];
		const w = way[b] - way[a];
		const d = start[b] - start[a] + end * w;
		slope += d * (end === 0 ? w + leave[b] - leave[a] : w - (reach[b] - reach[a]));
	}
	return slope;
}

/** The least of |D| about `from`, no further off than `reachable`, by Newton's method on its slope. */
function descend(
	{ start, way, leave, reach }: Bends,
	i: number,
	j: number,
	from: number,
	reachable: number,
	nearest: { at: number; distance: number },
): void {
	let s = from;
	let least = Infinity;
	for (let step = 0; step <= STEPS; step++) {
		const f = leaveWeight(s);
		const g = reachWeight(s);
		const [f1, g1] = [1 - 4 * s + 3 * s * s, 2 * s - 3 * s * s];
		const [f2, g2] = [6 * s - 4, 2 - 6 * s];
		let [square, slope, bend] = [0, 0, 0];
		for (let axis = 0; axis < 3; axis++) {
			const [a, b] = [3 * i + axis, 3 * j + axis];
			const w = way[b] - way[a];
			const p = leave[b] - leave[a];
			const q = reach[b] - reach[a];
			const d = start[b] - start[a] + s * w + f * p + g * q;
			const d1 = w + f1 * p + g1 * q;
			square += d * d;
			slope += d * d1;
			bend += d1 * d1 + d * (f2 * p + g2 * q);
		}
		if (square < least) {
			least = square;
			nearest.at = s;
		}
		if (bend <= 0 || step === STEPS) break;
		const next = Math.min(1, from + reachable, Math.max(0, from - reachable, s - slope / bend));
		if (next === s) break;
		s = next;
	}
	nearest.distance = Math.sqrt(least);
}

function grow(found: Approaches): void {
	const wider = <T extends Int32Array | Float64Array>(old: T, next: T): T => {
		next.set(old);
		return next;
	};
	const room = 2 * found.first.length;
	found.first = wider(found.first, new Int32Array(room));
	found.second = wider(found.second, new Int32Array(room));
	found.at = wider(found.at, new Float64Array(room));
	found.distance = wider(found.distance, new Float64Array(room));
}
