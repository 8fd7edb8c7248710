/** Points of the plane in square cells, added one by one, to ask whether one is near. */
export interface Nearness {
	add(x: number, y: number): void;
	/** Whether a point stands nearer than `distance`, at most the cell's side. */
	any(x: number, y: number, distance: number): boolean;
}

/** @param cell side of a cell; about the usual distance between points */
export function createNearness(cell: number): Nearness {
	const cells = new Map<number, number[]>();
	// Cell numbers are exact in float64 for ±2^25 columns and rows.
	const keyOf = (x: number, y: number, i: number, j: number): number =>
		(Math.floor(x / cell) + i) * 67108864 + Math.floor(y / cell) + j;
	const add = (x: number, y: number): void => {
		const key = keyOf(x, y, 0, 0);
		const held = cells.get(key);
		if (held === undefined) cells.set(key, [x, y]);
		else held.push(x, y);
	};
	const any = (x: number, y: number, distance: number): boolean => {
		for (let i = -1; i <= 1; i++)
			for (let j = -1; j <= 1; j++) {
				const held = cells.get(keyOf(x, y, i, j));
				if (held === undefined) continue;
				for (let k = 0; k < held.length; k += 2) if (Math.hypot(held[k] - x, held[k + 1] - y) < distance) return true;
			}
		return false;
	};
	return { add, any };
}

/** A fixed set of points in square cells, for many questions in a row. */
export interface PointGrid {
	/** Index of the nearest point, the lower of two equally near. */
	nearest(x: number, y: number): number;
	/** Calls back for each pair of points in the same or neighbouring cells, each pair once. */
	pairs(visit: (a: number, b: number) => void): void;
}

/**
 * @param points x y of point after point, at least one
 * @param cell side of a cell; about the usual distance between points
 */
export function createPointGrid(points: Float64Array, cell: number): PointGrid {
	const count = points.length / 2;
	let [left, bottom, right, top] = [Infinity, Infinity, -Infinity, -Infinity];
	for (let i = 0; i < count; i++) {
		left = Math.min(left, points[2 * i]);
		right = Math.max(right, points[2 * i]);
		bottom = Math.min(bottom, points[2 * i + 1]);
		top = Math.max(top, points[2 * i + 1]);
	}
	const columns = Math.floor((right - left) / cell) + 1;
	const rows = Math.floor((top - bottom) / cell) + 1;
	const cellOf = (i: number): number =>
		Math.floor((points[2 * i + 1] - bottom) / cell) * columns + Math.floor((points[2 * i] - left) / cell);
	// Counting sort: points of cell c are held[starts[c]] … held[starts[c + 1] − 1], rising.
	const starts = new Int32Array(columns * rows + 1);
	for (let i = 0; i < count; i++) starts[cellOf(i) + 1]++;
	for (let c = 0; c < columns * rows; c++) starts[c + 1] += starts[c];
	const held = new Int32Array(count);
	const next = starts.slice();
	for (let i = 0; i < count; i++) held[next[cellOf(i)]++] = i;

	const nearest = (x: number, y: number): number => {
		const column = Math.floor((x - left) / cell);
		const row = Math.floor((y - bottom) / cell);
		let best = Infinity;
		let found = -1;
		const last = Math.max(column, columns - column, row, rows - row, 0) + columns + rows;
		// Rings of cells outward; what lies in ring r is at least r − 1 cells away.
		for (let ring = 0; ring <= last; ring++) {
			if (ring > 1 && ((ring - 1) * cell) ** 2 > best) break;
			for (let j = Math.max(0, row - ring); j <= Math.min(rows - 1, row + ring); j++) {
				const whole = j === row - ring || j === row + ring;
				for (let i = column - ring; i <= column + ring; i += whole || ring === 0 ? 1 : 2 * ring) {
					if (i < 0 || i >= columns) continue;
					for (let k = starts[j * columns + i]; k < starts[j * columns + i + 1]; k++) {
						const point = held[k];
						const distance = (points[2 * point] - x) ** 2 + (points[2 * point + 1] - y) ** 2;
						if (distance < best || (distance === best && point < found)) {
							best = distance;
							found = point;
						}
					}
				}
			}
		}
		return found;
	};
	const pairs = (visit: (a: number, b: number) => void): void => {
		for (let c = 0; c < columns * rows; c++) {
			const column = c % columns;
			for (let k = starts[c]; k < starts[c + 1]; k++) {
				for (let m = k + 1; m < starts[c + 1]; m++) visit(held[k], held[m]);
				// The four neighbours that come later: right, and the row above.
				for (const [i, j] of LATER) {
					const other = c + j * columns + i;
					if (column + i < 0 || column + i >= columns || other >= columns * rows) continue;
					for (let m = starts[other]; m < starts[other + 1]; m++) visit(held[k], held[m]);
				}
			}
		}
	};
	return { nearest, pairs };
}

const LATER: readonly (readonly [number, number])[] = [
	[1, 0],
	[-1, 1],
	[0, 1],
	[1, 1],
];
