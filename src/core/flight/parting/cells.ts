/** Near pairs among points by a grid of cells as wide as one sees. */
export interface Cells {
	/**
	 * Every pair nearer than `sight`, once, in an order that depends on the points alone.
	 * @param points 3·N
	 */
	pairs(points: Float64Array, sight: number, tell: (i: number, j: number) => void): void;
}

/** The forward half of a cell's 26 neighbours: dx, dy, dz. */
const AHEAD = Int8Array.of(
	...[1, 0, 0, -1, 1, 0, 0, 1, 0, 1, 1, 0, -1, -1, 1, 0, -1, 1, 1, -1, 1],
	...[-1, 0, 1, 0, 0, 1, 1, 0, 1, -1, 1, 1, 0, 1, 1, 1, 1, 1],
);
/** Cells a drone at most; a wide fleet takes larger ones rather than more memory. */
const MOST_CELLS = 64;

export function createCells(count: number): Cells {
	const next = new Int32Array(count);
	const cellOf = new Int32Array(count);
	const along = [new Int32Array(count), new Int32Array(count), new Int32Array(count)];
	let head = new Int32Array(0);

	function pairs(points: Float64Array, sight: number, tell: (i: number, j: number) => void): void {
		const low = [Infinity, Infinity, Infinity];
		const high = [-Infinity, -Infinity, -Infinity];
		for (let c = 0; c < points.length; c++) {
			if (points[c] < low[c % 3]) low[c % 3] = points[c];
			if (points[c] > high[c % 3]) high[c % 3] = points[c];
		}
		let size = sight;
		const cellsAlong = (axis: number): number => Math.floor((high[axis] - low[axis]) / size) + 1;
		const limit = Math.max(4096, MOST_CELLS * count);
		while (cellsAlong(0) * cellsAlong(1) * cellsAlong(2) > limit) size *= 1.25;
		const [nx, ny, nz] = [cellsAlong(0), cellsAlong(1), cellsAlong(2)];
		if (head.length < nx * ny * nz) head = new Int32Array(nx * ny * nz).fill(-1);
		const [cx, cy, cz] = along;
		for (let i = count - 1; i >= 0; i--) {
			cx[i] = Math.floor((points[3 * i] - low[0]) / size);
			cy[i] = Math.floor((points[3 * i + 1] - low[1]) / size);
			cz[i] = Math.floor((points[3 * i + 2] - low[2]) / size);
			const cell = cx[i] + nx * (cy[i] + ny * cz[i]);
			cellOf[i] = cell;
			next[i] = head[cell];
			head[cell] = i;
		}
		const square = sight * sight;
		for (let i = 0; i < count; i++) {
			const [px, py, pz] = [points[3 * i], points[3 * i + 1], points[3 * i + 2]];
			for (let k = -3; k < AHEAD.length; k += 3) {
				let j = next[i];
				if (k >= 0) {
					const x = cx[i] + AHEAD[k];
					const y = cy[i] + AHEAD[k + 1];
					const z = cz[i] + AHEAD[k + 2];
					if (x < 0 || y < 0 || x >= nx || y >= ny || z >= nz) continue;
					j = head[x + nx * (y + ny * z)];
				}
				for (; j >= 0; j = next[j]) {
					const dx = points[3 * j] - px;
					const dy = points[3 * j + 1] - py;
					const dz = points[3 * j + 2] - pz;
					if (dx * dx + dy * dy + dz * dz < square) tell(i, j);
				}
			}
		}
		for (let i = 0; i < count; i++) head[cellOf[i]] = -1;
	}
	return { pairs };
}
