import { type Arcs, type Sets, squaredDistance } from "./sparse-arcs.ts";

/**
 * A partial matching with dual prices: u[i] + v[j] ≤ cost on every arc, with equality on matched ones. All whole mm²,
 * so every sum and comparison is exact.
 */
export interface Matching {
	/** N: dual price of each row and column, mm². */
	readonly u: Float64Array;
	readonly v: Float64Array;
	/** N: column of each row and row of each column, −1 while free. */
	readonly columnOf: Int32Array;
	readonly rowOf: Int32Array;
}

/**
 * Augmenting row reduction (Jonker & Volgenant 1987, step 3): each free row bids for its cheapest column up to the price
 * of its second cheapest, pushing out who had it. At most `rounds` passes: ties would go round for ever.
 */
export function reduceRows(sets: Sets, arcs: Arcs, matching: Matching, rounds: number): void {
	const { u, v, columnOf, rowOf } = matching;
	let free = freeRows(columnOf);
	for (let round = 0; round < rounds && free.length > 0; round++) {
		const next: number[] = [];
		let steps = 0;
		for (let k = 0; k < free.length; k++) {
			let row = free[k];
			while (row >= 0) {
				let lowest = Infinity;
				let second = Infinity;
				let column = -1;
				let other = -1;
				for (let a = arcs.starts[row]; a < arcs.starts[row + 1]; a++) {
					const value = squaredDistance(sets, row, arcs.columns[a]) - v[arcs.columns[a]];
					if (value >= second) continue;
					if (value < lowest) {
						second = lowest;
						other = column;
						lowest = value;
						column = arcs.columns[a];
					} else {
						second = value;
						other = arcs.columns[a];
					}
				}
				if (column < 0) break;
				let holder = rowOf[column];
				const strict = second > lowest && second < Infinity;
				if (strict) v[column] -= second - lowest;
				else if (holder >= 0 && other >= 0 && second === lowest) {
					column = other;
					holder = rowOf[column];
				}
				u[row] = second < Infinity ? second : lowest;
				columnOf[row] = column;
				rowOf[column] = row;
				if (holder < 0) break;
				columnOf[holder] = -1;
				// A strict bid lets the one pushed out bid at once; a tie waits for the next pass.
				if (strict && steps++ < 4 * columnOf.length) row = holder;
				else {
					next.push(holder);
					break;
				}
			}
			if (row >= 0 && columnOf[row] < 0) next.push(row);
		}
		free = next;
	}
}

export function freeRows(columnOf: Int32Array): number[] {
	const free: number[] = [];
	for (let i = 0; i < columnOf.length; i++) if (columnOf[i] < 0) free.push(i);
	return free;
}

/** Room that searches share: allocated once for an assignment and handed down. */
export interface SearchRoom {
	readonly distance: Float64Array;
	readonly previous: Int32Array;
	readonly mark: Int32Array;
	/** Columns in the order in which they were settled. */
	readonly settled: Int32Array;
	readonly heapKeys: number[];
	readonly heapColumns: number[];
	stamp: number;
}

export function createSearchRoom(count: number): SearchRoom {
	return {
		distance: new Float64Array(count),
		previous: new Int32Array(count),
		mark: new Int32Array(count),
		settled: new Int32Array(count),
		heapKeys: [],
		heapColumns: [],
		stamp: 0,
	};
}

/**
 * Matches free row `start` along the shortest augmenting path in reduced costs (Dijkstra with a binary heap) and moves
 * the prices so that the matching stays tight (Jonker & Volgenant 1987, step 4).
 * @returns −1 when matched; else the number of columns reached, which stand in room.settled: none of them leads to a
 * free column by these arcs
 */
export function augmentRow(sets: Sets, arcs: Arcs, matching: Matching, room: SearchRoom, start: number): number {
	const { u, v, columnOf, rowOf } = matching;
	const { distance, previous, mark, settled, heapKeys, heapColumns } = room;
	room.stamp += 2;
	const touched = room.stamp - 1;
	const closed = room.stamp;
	heapKeys.length = 0;
	heapColumns.length = 0;
	let lowest = Infinity;
	for (let a = arcs.starts[start]; a < arcs.starts[start + 1]; a++) {
		const value = squaredDistance(sets, start, arcs.columns[a]) - v[arcs.columns[a]];
		if (value < lowest) lowest = value;
	}
	if (lowest === Infinity) return 0;
	u[start] = lowest;
	let row = start;
	let reached = 0;
	let count = 0;
	let end = -1;
	while (true) {
		const base = reached - u[row];
		for (let a = arcs.starts[row]; a < arcs.starts[row + 1]; a++) {
			const column = arcs.columns[a];
			if (mark[column] === closed) continue;
			const value = base + squaredDistance(sets, row, column) - v[column];
			if (mark[column] === touched && value >= distance[column]) continue;
			mark[column] = touched;
			distance[column] = value;
			previous[column] = row;
			push(heapKeys, heapColumns, value, column);
		}
		let column = -1;
		while (heapKeys.length > 0) {
			const key = heapKeys[0];
			const candidate = heapColumns[0];
			pop(heapKeys, heapColumns);
			if (mark[candidate] === closed || key !== distance[candidate]) continue;
			column = candidate;
			break;
		}
		if (column < 0) return count;
		reached = distance[column];
		if (rowOf[column] < 0) {
			end = column;
			break;
		}
		mark[column] = closed;
		settled[count++] = column;
		row = rowOf[column];
	}
	for (let k = 0; k < count; k++) {
		const column = settled[k];
		const change = reached - distance[column];
		v[column] -= change;
		u[rowOf[column]] += change;
	}
	u[start] += reached;
	while (true) {
		const from = previous[end];
		const next = columnOf[from];
		rowOf[end] = from;
		columnOf[from] = end;
		if (from === start) return -1;
		end = next;
	}
}

/** Smaller distance first, then the lower column: ties never depend on the order of arrival. */
function before(keys: number[], columns: number[], i: number, key: number, column: number): boolean {
	return keys[i] < key || (keys[i] === key && columns[i] < column);
}

function push(keys: number[], columns: number[], key: number, column: number): void {
	let at = keys.length;
	keys.push(key);
	columns.push(column);
	while (at > 0) {
		const parent = (at - 1) >> 1;
		if (before(keys, columns, parent, key, column)) break;
		keys[at] = keys[parent];
		columns[at] = columns[parent];
		at = parent;
	}
	keys[at] = key;
	columns[at] = column;
}

function pop(keys: number[], columns: number[]): void {
	const key = keys.pop();
	const column = columns.pop();
	const size = keys.length;
	if (size === 0 || key === undefined || column === undefined) return;
	let at = 0;
	while (true) {
		let child = 2 * at + 1;
		if (child >= size) break;
		if (child + 1 < size && before(keys, columns, child + 1, keys[child], columns[child])) child++;
		if (!before(keys, columns, child, key, column)) break;
		keys[at] = keys[child];
		columns[at] = columns[child];
		at = child;
	}
	keys[at] = key;
	columns[at] = column;
}
