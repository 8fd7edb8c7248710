/**
 * Smallest distance between two points of a set in the measure of spacing: z divided by the downwash factor, so that
 * the exclusion ellipsoid about a drone is a sphere. Sweep along the longest axis.
 */
export interface SmallestGap {
	/** Metres in the measure of spacing; Infinity with fewer than two points. */
	readonly distance: number;
	/** Indices of the two points, the lower first; null with fewer than two points. */
	readonly pair: readonly [number, number] | null;
}

/**
 * @param positions 3·N metres
 * @param downwash vertical spacing over horizontal spacing
 */
export function smallestGap(positions: ArrayLike<number>, downwash: number): SmallestGap {
	const count = Math.floor(positions.length / 3);
	if (count < 2) return { distance: Infinity, pair: null };
	const { order, points } = sweepOrder(positions, downwash);
	let best = Infinity;
	let first = 0;
	let second = 1;
	for (let m = 0; m < count; m++) {
		const key = points[3 * m];
		for (let n = m + 1; n < count; n++) {
			const along = points[3 * n] - key;
			if (along * along > best) break;
			const across = points[3 * n + 1] - points[3 * m + 1];
			const over = points[3 * n + 2] - points[3 * m + 2];
			const squared = along * along + across * across + over * over;
			if (squared > best) continue;
			const low = Math.min(order[m], order[n]);
			const high = Math.max(order[m], order[n]);
			// Ties go to the lowest indices, so that the same set always names the same two drones.
			if (squared === best && (low > first || (low === first && high >= second))) continue;
			best = squared;
			first = low;
			second = high;
		}
	}
	return { distance: Math.sqrt(best), pair: [first, second] };
}

/**
 * All pairs nearer than `radius` in the measure of spacing, as i0 j0 i1 j1 …, i < j, in the order of the sweep.
 * @param positions 3·N metres
 * @param radius metres
 */
export function pairsWithin(positions: ArrayLike<number>, downwash: number, radius: number): Int32Array {
	const count = Math.floor(positions.length / 3);
	const { order, points } = sweepOrder(positions, downwash);
	const found: number[] = [];
	for (let m = 0; m < count; m++) {
		for (let n = m + 1; n < count; n++) {
			const along = points[3 * n] - points[3 * m];
			if (along >= radius) break;
			const across = points[3 * n + 1] - points[3 * m + 1];
			const over = points[3 * n + 2] - points[3 * m + 2];
			if (along * along + across * across + over * over >= radius * radius) continue;
			found.push(Math.min(order[m], order[n]), Math.max(order[m], order[n]));
		}
	}
	return Int32Array.from(found);
}

/** Indices sorted along the longest axis, and the scaled points in that order with that axis first. */
function sweepOrder(positions: ArrayLike<number>, downwash: number): { order: Int32Array; points: Float64Array } {
	const count = Math.floor(positions.length / 3);
	const scale = [1, 1, 1 / downwash];
	let longest = 0;
	let extent = -1;
	for (let axis = 0; axis < 3; axis++) {
		let low = Infinity;
		let high = -Infinity;
		for (let i = 0; i < count; i++) {
			const value = positions[3 * i + axis] * scale[axis];
			if (value < low) low = value;
			if (value > high) high = value;
		}
		if (high - low > extent) {
			extent = high - low;
			longest = axis;
		}
	}
	const order = Int32Array.from({ length: count }, (_, i) => i);
	order.sort((i, j) => positions[3 * i + longest] - positions[3 * j + longest] || i - j);
	const points = new Float64Array(3 * count);
	for (let m = 0; m < count; m++) {
		for (let n = 0; n < 3; n++) {
			const axis = (longest + n) % 3;
			points[3 * m + n] = positions[3 * order[m] + axis] * scale[axis];
		}
	}
	return { order, points };
}
