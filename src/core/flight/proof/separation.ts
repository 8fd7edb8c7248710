/**
 * The smallest gap of a whole leg, over all pairs and every s in [0, 1]. Shares nothing with the planner. s is cut into
 * slabs; in each, a sweep over the drones' hulls leaves the pairs that can come near; for those |D(s)|² in Bernstein
 * form is subdivided until its lower bound is proven (a pair on straight lines has it in closed form).
 */
import { bernsteinMatrix, binomials, halve } from "../../maths/index.ts";

export interface SmallestSeparation {
	/** Metres in the measure of spacing, to 1e-9 of itself; Infinity with fewer than two drones. */
	readonly distance: number;
	/** Where on the way: s in [0, 1]. */
	readonly at: number;
	readonly drones: readonly [number, number];
}

/** Share of |D|² to which the smallest is narrowed down. */
const NARROW = 2e-9;
const MOST_SLABS = 48;
const DEEPEST = 60;

/** @param paths N × 3 × (degree + 1) power coefficients, m */
export function smallestSeparation(
	paths: Float64Array,
	degree: number,
	count: number,
	downwash: number,
): SmallestSeparation {
	const search = createSearch(paths, degree, count, downwash);
	if (count > 1) {
		search.slab(0, 0);
		search.slab(1, 1);
		const slabs = search.slabs();
		for (let k = 0; k < slabs; k++) search.slab(k / slabs, (k + 1) / slabs);
	}
	return search.result();
}

function createSearch(paths: Float64Array, degree: number, count: number, downwash: number) {
	const width = degree + 1;
	const square = 2 * degree;
	const choose = binomials(Math.max(1, square));
	const chooseWidth = Math.max(1, square) + 1;
	// Weight of D_i·D_j in coefficient i + j of |D|².
	const weights = new Float64Array(width * width);
	for (let i = 0; i < width; i++) {
		for (let j = 0; j < width; j++) {
			weights[i * width + j] =
				(choose[degree * chooseWidth + i] * choose[degree * chooseWidth + j]) / choose[square * chooseWidth + i + j];
		}
	}
	// N × 3 × width Bernstein coefficients on the slab, z in the measure of spacing; boxes low and high of each.
	const control = new Float64Array(count * 3 * width);
	const lows = new Float64Array(count * 3);
	const highs = new Float64Array(count * 3);
	const difference = new Float64Array(3 * width);
	const squared = new Float64Array(square + 1);
	// Stack of subdivided |D|²: a level deeper, one entry more.
	const stack = new Float64Array((DEEPEST + 2) * (square + 1));
	const stackFrom = new Float64Array(DEEPEST + 2);
	const stackTo = new Float64Array(DEEPEST + 2);
	const halves = new Float64Array(2 * (square + 1));
	const right = halves.subarray(square + 1);
	let best = Infinity;
	let bestAt = 0;
	let first = 0;
	let second = 1;

	const take = (value: number, at: number, i: number, j: number): void => {
		if (value >= best) return;
		best = Math.max(0, value);
		bestAt = at;
		first = Math.min(i, j);
		second = Math.max(i, j);
	};

	const prepare = (low: number, high: number): void => {
		const matrix = bernsteinMatrix(degree, low, high);
		for (let i = 0; i < 3 * count; i++) {
			const scale = i % 3 === 2 ? 1 / downwash : 1;
			let least = Infinity;
			let most = -Infinity;
			for (let row = 0; row < width; row++) {
				let value = 0;
				for (let k = 0; k < width; k++) value += matrix[row * width + k] * paths[i * width + k];
				value *= scale;
				control[i * width + row] = value;
				if (value < least) least = value;
				if (value > most) most = value;
			}
			lows[i] = least;
			highs[i] = most;
		}
	};

	/** Narrows the least of |D|² of one pair on the slab down, as far as it can matter. */
	const judge = (i: number, j: number, low: number, high: number): void => {
		for (let k = 0; k < 3 * width; k++) difference[k] = control[3 * width * i + k] - control[3 * width * j + k];
		squared.fill(0);
		for (let axis = 0; axis < 3; axis++) {
			for (let m = 0; m < width; m++) {
				const a = difference[axis * width + m];
				for (let n = 0; n < width; n++) squared[m + n] += weights[m * width + n] * a * difference[axis * width + n];
			}
		}
		let least = Infinity;
		for (let k = 0; k <= square; k++) if (squared[k] < least) least = squared[k];
		if (least >= best * (1 - NARROW)) return;
		if (degree === 1) {
			// A quadratic: its least lies at an end or at the foot of the perpendicular.
			const bend = squared[0] - 2 * squared[1] + squared[2];
			const foot =
				bend > 0 ? Math.min(1, Math.max(0, (squared[0] - squared[1]) / bend)) : squared[0] <= squared[2] ? 0 : 1;
			let exact = 0;
			for (let axis = 0; axis < 3; axis++) {
				const value = difference[2 * axis] + foot * (difference[2 * axis + 1] - difference[2 * axis]);
				exact += value * value;
			}
			take(exact, low + foot * (high - low), i, j);
			return;
		}
		stack.set(squared, 0);
		stackFrom[0] = low;
		stackTo[0] = high;
		let depth = 1;
		while (depth > 0) {
			depth--;
			const base = depth * (square + 1);
			take(stack[base], stackFrom[depth], i, j);
			take(stack[base + square], stackTo[depth], i, j);
			let lower = Infinity;
			for (let k = 0; k <= square; k++) if (stack[base + k] < lower) lower = stack[base + k];
			if (lower >= best * (1 - NARROW)) continue;
			const from = stackFrom[depth];
			const to = stackTo[depth];
			if (depth + 2 > DEEPEST || to - from < 1e-12) {
				take(lower, (from + to) / 2, i, j);
				continue;
			}
			halve(stack, base, square, halves, right, 0);
			stack.set(halves.subarray(0, square + 1), base);
			stack.set(right, base + square + 1);
			const middle = (from + to) / 2;
			stackTo[depth] = middle;
			stackFrom[depth + 1] = middle;
			stackTo[depth + 1] = to;
			depth += 2;
		}
	};

	const slab = (low: number, high: number): void => {
		prepare(low, high);
		const axis = longestAxis(lows, count);
		const other = (axis + 1) % 3;
		const third = (axis + 2) % 3;
		const order = Int32Array.from({ length: count }, (_, i) => i);
		order.sort((i, j) => lows[3 * i + axis] - lows[3 * j + axis] || i - j);
		let reach = Math.sqrt(best);
		for (let m = 0; m < count; m++) {
			const i = 3 * order[m];
			const end = highs[i + axis];
			for (let n = m + 1; n < count; n++) {
				const j = 3 * order[n];
				if (lows[j + axis] - end > reach) break;
				if (lows[j + other] - highs[i + other] > reach || lows[i + other] - highs[j + other] > reach) continue;
				if (lows[j + third] - highs[i + third] > reach || lows[i + third] - highs[j + third] > reach) continue;
				const before = best;
				judge(order[m], order[n], low, high);
				if (best !== before) reach = Math.sqrt(best);
			}
		}
	};

	return {
		slab,
		/** So many that in one slab a drone moves about as far as the smallest gap, the fleet's common motion taken off. */
		slabs(): number {
			prepare(0, 1);
			const common = new Float64Array(3);
			for (let i = 0; i < 3 * count; i++) common[i % 3] += (control[i * width + degree] - control[i * width]) / count;
			let travel = 0;
			for (let i = 0; i < 3 * count; i++) travel += Math.abs(highs[i] - lows[i]);
			const drift = Math.abs(common[0]) + Math.abs(common[1]) + Math.abs(common[2]);
			const mean = Math.max(0, travel / count - 0.5 * drift);
			return Math.max(1, Math.min(MOST_SLABS, Math.ceil(mean / Math.max(1e-9, 2 * Math.sqrt(best)))));
		},
		result: (): SmallestSeparation => ({ distance: Math.sqrt(best), at: bestAt, drones: [first, second] }),
	};
}

function longestAxis(lows: Float64Array, count: number): number {
	let longest = 0;
	let extent = -1;
	for (let axis = 0; axis < 3; axis++) {
		let low = Infinity;
		let high = -Infinity;
		for (let i = 0; i < count; i++) {
			low = Math.min(low, lows[3 * i + axis]);
			high = Math.max(high, lows[3 * i + axis]);
		}
		if (high - low > extent) {
			extent = high - low;
			longest = axis;
		}
	}
	return longest;
}
