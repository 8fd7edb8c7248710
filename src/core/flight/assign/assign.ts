/**
 * Who goes where: the assignment of least sum of squared distances, exact, for 1 to 10 000 drones, without a matrix.
 * Shortest augmenting paths on a sparse set of arcs (Jonker & Volgenant 1987) with prices carried down from a coarser
 * problem, then pricing of all pairs until none is violated: dual feasibility over all N² pairs is the certificate.
 */
import { augmentRow, createSearchRoom, freeRows, type Matching, reduceRows } from "./augment.ts";
import { mortonOrder } from "./morton.ts";
import {
	type Allowed,
	type Arcs,
	collectArcs,
	firstColumn,
	lowestArcs,
	type Sets,
	squaredDistance,
} from "./sparse-arcs.ts";

const ARCS_A_ROW = 14;
const ARCS_A_COLUMN = 6;
/** Below this size prices from a coarser problem save nothing. */
const COARSEST = 96;

export interface Assignment {
	/** N: column of each row. */
	readonly target: Int32Array;
	/** N: dual prices, mm². */
	readonly u: Float64Array;
	readonly v: Float64Array;
	/** mm²: sum of squared distances and of the prices; equal, and all pairs priced, means optimal. */
	readonly cost: number;
	readonly bound: number;
	readonly optimal: boolean;
}

/**
 * @param from,to 3·N whole millimetres in the measure of spacing
 * @param allowed forbids pairs; with it the answer is the cheapest among what is allowed
 * @param warm prices and matching of an earlier answer for the same sets
 * @returns null when what is allowed holds no complete matching
 */
export function assign(
	from: Float64Array,
	to: Float64Array,
	allowed?: Allowed,
	warm?: Pick<Assignment, "target" | "u" | "v">,
): Assignment | null {
	const count = from.length / 3;
	const sets: Sets = { count, from, to };
	const matching: Matching = {
		u: new Float64Array(count),
		v: warm === undefined ? startingPrices(sets) : warm.v.slice(),
		columnOf: new Int32Array(count).fill(-1),
		rowOf: new Int32Array(count).fill(-1),
	};
	const lowest = lowestArcs(sets, matching.v, ARCS_A_ROW, ARCS_A_COLUMN, allowed);
	matching.u.set(lowest.u);
	let rows: number[] = Array.from(lowest.rows.subarray(0, lowest.length));
	let columns: number[] = Array.from(lowest.columns.subarray(0, lowest.length));
	let arcs = collectArcs(count, rows, columns, rows.length);
	if (warm !== undefined) keepMatched(sets, matching, warm.target, allowed);
	else reduceRows(sets, arcs, matching, 3);
	const room = createSearchRoom(count);
	while (true) {
		for (const row of freeRows(matching.columnOf)) {
			while (true) {
				const reached = augmentRow(sets, arcs, matching, room, row);
				if (reached < 0) break;
				// These arcs don't reach a free column: let the rows of the dead end see more of the whole.
				const more = widen(sets, matching, row, room.settled.subarray(0, reached), allowed);
				if (more.columns.length === 0) return null;
				({ rows, columns, arcs } = withArcs(sets.count, arcs, more.rows, more.columns));
			}
		}
		const violated = priceAll(sets, matching, allowed);
		if (violated.columns.length === 0) break;
		({ rows, columns, arcs } = withArcs(sets.count, arcs, violated.rows, violated.columns));
	}
	let cost = 0;
	let bound = 0;
	for (let i = 0; i < count; i++) {
		cost += squaredDistance(sets, i, matching.columnOf[i]);
		bound += matching.u[i] + matching.v[i];
	}
	return { target: matching.columnOf, u: matching.u, v: matching.v, cost, bound, optimal: cost === bound };
}

/** Prices of the columns from a problem of every fourth point along the Z-order curve, spread by the c-transform. */
function startingPrices(sets: Sets): Float64Array {
	const { count, from, to } = sets;
	const v = new Float64Array(count);
	if (count < COARSEST) return v;
	const coarse = Math.ceil(count / 4);
	const coarseFrom = everyFourth(from, coarse);
	const solved = assign(coarseFrom, everyFourth(to, coarse));
	if (solved === null) return v;
	const offset = new Float64Array(coarse);
	for (let i = 0; i < coarse; i++) {
		const x = coarseFrom[3 * i];
		const y = coarseFrom[3 * i + 1];
		const z = coarseFrom[3 * i + 2];
		offset[i] = x * x + y * y + z * z - solved.u[i];
	}
	for (let j = 0; j < count; j++) {
		const x = to[3 * j];
		const y = to[3 * j + 1];
		const z = to[3 * j + 2];
		let lowest = Infinity;
		for (let i = 0; i < coarse; i++) {
			const product = x * coarseFrom[3 * i] + y * coarseFrom[3 * i + 1] + z * coarseFrom[3 * i + 2];
			const value = offset[i] - 2 * product;
			if (value < lowest) lowest = value;
		}
		v[j] = lowest + x * x + y * y + z * z;
	}
	return v;
}

function everyFourth(points: Float64Array, coarse: number): Float64Array {
	const order = mortonOrder(points);
	const kept = new Float64Array(3 * coarse);
	for (let k = 0; k < coarse; k++) for (let n = 0; n < 3; n++) kept[3 * k + n] = points[3 * order[4 * k] + n];
	return kept;
}

/** Takes over from an earlier matching what is still allowed and tight. */
function keepMatched(sets: Sets, matching: Matching, target: Int32Array, allowed: Allowed | undefined): void {
	for (let i = 0; i < sets.count; i++) {
		const j = target[i];
		if (allowed !== undefined && !allowed(i, j)) continue;
		if (squaredDistance(sets, i, j) - matching.v[j] !== matching.u[i]) continue;
		matching.columnOf[i] = j;
		matching.rowOf[j] = i;
	}
}

function withArcs(
	count: number,
	arcs: Arcs,
	moreRows: number[],
	moreColumns: number[],
): { rows: number[]; columns: number[]; arcs: Arcs } {
	const rows: number[] = [];
	const columns: number[] = [];
	for (let i = 0; i < count; i++) {
		for (let a = arcs.starts[i]; a < arcs.starts[i + 1]; a++) {
			rows.push(i);
			columns.push(arcs.columns[a]);
		}
	}
	for (let k = 0; k < moreRows.length; k++) {
		rows.push(moreRows[k]);
		columns.push(moreColumns[k]);
	}
	return { rows, columns, arcs: collectArcs(count, rows, columns, rows.length) };
}

/** For every row of a dead end, its cheapest allowed columns outside it. None at all: no complete matching exists. */
function widen(
	sets: Sets,
	matching: Matching,
	start: number,
	reached: Int32Array,
	allowed: Allowed | undefined,
): { rows: number[]; columns: number[] } {
	const inside = new Uint8Array(sets.count);
	for (const column of reached) inside[column] = 1;
	const rows: number[] = [];
	const columns: number[] = [];
	const perRow = 4;
	for (let k = -1; k < reached.length; k++) {
		const row = k < 0 ? start : matching.rowOf[reached[k]];
		const found: { value: number; column: number }[] = [];
		for (let n = 0, j = firstColumn(row, sets.count); n < sets.count; n++, j = j + 1 < sets.count ? j + 1 : 0) {
			if (inside[j] === 1) continue;
			const value = squaredDistance(sets, row, j) - matching.v[j];
			if (found.length === perRow && value >= found[perRow - 1].value) continue;
			if (allowed !== undefined && !allowed(row, j)) continue;
			if (found.length === perRow) found.pop();
			let at = found.length;
			while (at > 0 && found[at - 1].value > value) at--;
			found.splice(at, 0, { value, column: j });
		}
		for (const { column } of found) {
			rows.push(row);
			columns.push(column);
		}
	}
	return { rows, columns };
}

/**
 * Looks at all pairs for |a − b|² < u + v. Rows that are violated get their price lowered to feasible and lose their
 * match when it is no longer tight.
 * @returns the violated arcs, the worst few of each row
 */
function priceAll(sets: Sets, matching: Matching, allowed: Allowed | undefined): { rows: number[]; columns: number[] } {
	const { count, from, to } = sets;
	const { u, v, columnOf, rowOf } = matching;
	const offset = new Float64Array(count);
	const tx = new Float64Array(count);
	const ty = new Float64Array(count);
	const tz = new Float64Array(count);
	for (let j = 0; j < count; j++) {
		tx[j] = to[3 * j];
		ty[j] = to[3 * j + 1];
		tz[j] = to[3 * j + 2];
		offset[j] = tx[j] * tx[j] + ty[j] * ty[j] + tz[j] * tz[j] - v[j];
	}
	const rows: number[] = [];
	const columns: number[] = [];
	const perRow = 8;
	const values = new Float64Array(perRow);
	const bests = new Int32Array(perRow);
	for (let i = 0; i < count; i++) {
		const ax = 2 * from[3 * i];
		const ay = 2 * from[3 * i + 1];
		const az = 2 * from[3 * i + 2];
		let worst = u[i] - (ax * ax + ay * ay + az * az) / 4;
		let held = 0;
		for (let n = 0, j = firstColumn(i, count); n < count; n++, j = j + 1 < count ? j + 1 : 0) {
			const value = offset[j] - ax * tx[j] - ay * ty[j] - az * tz[j];
			if (value >= worst) continue;
			if (allowed !== undefined && !allowed(i, j)) continue;
			let at = held < perRow ? held++ : perRow - 1;
			while (at > 0 && values[at - 1] > value) {
				values[at] = values[at - 1];
				bests[at] = bests[at - 1];
				at--;
			}
			values[at] = value;
			bests[at] = j;
			if (held === perRow) worst = values[perRow - 1];
		}
		if (held === 0) continue;
		for (let k = 0; k < held; k++) {
			rows.push(i);
			columns.push(bests[k]);
		}
		u[i] = values[0] + (ax * ax + ay * ay + az * az) / 4;
		const column = columnOf[i];
		if (column >= 0) {
			rowOf[column] = -1;
			columnOf[i] = -1;
		}
	}
	return { rows, columns };
}
