/** Which pairs may be matched at all: forbids flights that would take too long. Undefined: all may. */
export type Allowed = (row: number, column: number) => boolean;

/** Point sets of an assignment, 3·N whole millimetres each in the measure of spacing. */
export interface Sets {
	readonly count: number;
	readonly from: Float64Array;
	readonly to: Float64Array;
}

/** Arcs of a sparse bipartite graph, row after row: columns of row i lie in [starts[i], starts[i + 1]). */
export interface Arcs {
	readonly starts: Int32Array;
	readonly columns: Int32Array;
}

/** mm², exact. */
export function squaredDistance(sets: Sets, row: number, column: number): number {
	const x = sets.from[3 * row] - sets.to[3 * column];
	const y = sets.from[3 * row + 1] - sets.to[3 * column + 1];
	const z = sets.from[3 * row + 2] - sets.to[3 * column + 2];
	return x * x + y * y + z * z;
}

/** Arcs with double entries removed, from growing lists of rows and columns. */
export function collectArcs(count: number, rows: ArrayLike<number>, columns: ArrayLike<number>, length: number): Arcs {
	const starts = new Int32Array(count + 1);
	for (let k = 0; k < length; k++) starts[rows[k] + 1]++;
	for (let i = 0; i < count; i++) starts[i + 1] += starts[i];
	const place = starts.slice();
	const sorted = new Int32Array(length);
	for (let k = 0; k < length; k++) sorted[place[rows[k]]++] = columns[k];
	let kept = 0;
	const seen = new Int32Array(count).fill(-1);
	for (let i = 0; i < count; i++) {
		const begin = starts[i];
		const end = i + 1 < count ? starts[i + 1] : length;
		starts[i] = kept;
		for (let k = begin; k < end; k++) {
			const column = sorted[k];
			if (seen[column] === i) continue;
			seen[column] = i;
			sorted[kept++] = column;
		}
	}
	starts[count] = kept;
	return { starts, columns: sorted.slice(0, kept) };
}

/**
 * Where row i begins to look at columns: raster shapes tie by the hundred, and if every row began at the first column all
 * of them would keep the same few.
 */
export function firstColumn(row: number, count: number): number {
	const turn = row * 0.6180339887498949;
	return Math.floor((turn - Math.floor(turn)) * count);
}

/** 0 for a quarter of all pairs, without a pattern: which of the rows that tie for a column it keeps. */
function spreads(row: number, column: number): number {
	return (Math.imul(row ^ Math.imul(column, 0x9e3779b1), 0x85ebca6b) >>> 13) & 3;
}

/**
 * The arcs of lowest reduced cost |a − b|² − v: the best `perRow` of each row and, since raster shapes tie massively,
 * the best `perColumn` of each column once the row's best is taken off. All pairs are looked at, none is stored.
 * @returns the arcs and, for each row, the lowest |a − b|² − v there is
 */
export function lowestArcs(
	sets: Sets,
	v: Float64Array,
	perRow: number,
	perColumn: number,
	allowed: Allowed | undefined,
): { rows: Int32Array; columns: Int32Array; length: number; u: Float64Array } {
	const { count, from, to } = sets;
	const rowLimit = Math.min(perRow, count);
	const columnLimit = Math.min(perColumn, count);
	// |a − b|² − v = |a|² + (|b|² − v) − 2 a·b: the first term is the same along a row.
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
	const rows = new Int32Array(count * (rowLimit + columnLimit));
	const columns = new Int32Array(count * (rowLimit + columnLimit));
	let length = 0;
	const u = new Float64Array(count);
	const bestValue = new Float64Array(rowLimit);
	const bestColumn = new Int32Array(rowLimit);
	const columnValue = new Float64Array(count * columnLimit).fill(Infinity);
	const columnRow = new Int32Array(count * columnLimit).fill(-1);
	const reduced = new Float64Array(count);
	for (let i = 0; i < count; i++) {
		const ax = 2 * from[3 * i];
		const ay = 2 * from[3 * i + 1];
		const az = 2 * from[3 * i + 2];
		let held = 0;
		let worst = Infinity;
		for (let k = 0, j = firstColumn(i, count); k < count; k++, j = j + 1 < count ? j + 1 : 0) {
			const value = offset[j] - ax * tx[j] - ay * ty[j] - az * tz[j];
			reduced[j] = value;
			if (value >= worst) continue;
			if (allowed !== undefined && !allowed(i, j)) {
				reduced[j] = Infinity;
				continue;
			}
			let at = held < rowLimit ? held++ : rowLimit - 1;
			while (at > 0 && bestValue[at - 1] > value) {
				bestValue[at] = bestValue[at - 1];
				bestColumn[at] = bestColumn[at - 1];
				at--;
			}
			bestValue[at] = value;
			bestColumn[at] = j;
			if (held === rowLimit) worst = bestValue[rowLimit - 1];
		}
		const lowest = held > 0 ? bestValue[0] : 0;
		u[i] = lowest + (ax * ax + ay * ay + az * az) / 4;
		for (let k = 0; k < held; k++) {
			rows[length] = i;
			columns[length++] = bestColumn[k];
		}
		for (let j = 0; j < count; j++) {
			const last = j * columnLimit + columnLimit - 1;
			const value = reduced[j] - lowest;
			if (value > columnValue[last] || (value === columnValue[last] && spreads(i, j) !== 0)) continue;
			if (allowed !== undefined && !allowed(i, j)) continue;
			let at = last;
			while (at > j * columnLimit && columnValue[at - 1] > value) {
				columnValue[at] = columnValue[at - 1];
				columnRow[at] = columnRow[at - 1];
				at--;
			}
			columnValue[at] = value;
			columnRow[at] = i;
		}
	}
	for (let k = 0; k < count * columnLimit; k++) {
		if (columnRow[k] < 0) continue;
		rows[length] = columnRow[k];
		columns[length++] = Math.floor(k / columnLimit);
	}
	return { rows, columns, length, u };
}
