/**
 * Paths of a whole fleet as polynomials in s: N × 3 × (degree + 1) coefficients in metres, lowest power first.
 */
export interface Paths {
	readonly degree: number;
	readonly coefficients: Float64Array;
}

/** Straight lines from slot i of `from` to slot target[i] of `to`. */
export function straightPaths(from: Float64Array, to: Float64Array, target: Int32Array): Paths {
	const count = target.length;
	const coefficients = new Float64Array(count * 6);
	for (let i = 0; i < count; i++) {
		for (let axis = 0; axis < 3; axis++) {
			const start = from[3 * i + axis];
			coefficients[6 * i + 2 * axis] = start;
			coefficients[6 * i + 2 * axis + 1] = to[3 * target[i] + axis] - start;
		}
	}
	return { degree: 1, coefficients };
}

/** One coordinate of one drone at s. */
export function pathAt(paths: Paths, drone: number, axis: number, s: number): number {
	const width = paths.degree + 1;
	const start = (3 * drone + axis) * width;
	let value = 0;
	for (let k = paths.degree; k >= 0; k--) value = value * s + paths.coefficients[start + k];
	return value;
}
