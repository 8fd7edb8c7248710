/**
 * Polynomials in Bernstein form: the coefficients enclose the values (convex hull property), which is what turns a
 * sign or a bound into a proof (Farouki, The Bernstein polynomial basis: a centennial retrospective, CAGD 2012).
 */

/** Binomial coefficients n over k for n ≤ `most`: row n starts at n·(most + 1). */
export function binomials(most: number): Float64Array {
	const width = most + 1;
	const table = new Float64Array(width * width);
	for (let n = 0; n <= most; n++) {
		table[n * width] = 1;
		for (let k = 1; k <= n; k++)
			table[n * width + k] = table[(n - 1) * width + k - 1] + (k < n ? table[(n - 1) * width + k] : 0);
	}
	return table;
}

/**
 * Matrix that takes power coefficients (lowest first) to Bernstein coefficients on [low, high], row after row:
 * (degree + 1)² numbers.
 */
export function bernsteinMatrix(degree: number, low: number, high: number): Float64Array {
	const width = degree + 1;
	const choose = binomials(degree);
	const matrix = new Float64Array(width * width);
	const span = high - low;
	for (let power = 0; power <= degree; power++) {
		// x^power = (low + span·τ)^power, then τ^k into Bernstein form.
		for (let k = 0; k <= power; k++) {
			const part = choose[power * width + k] * low ** (power - k) * span ** k;
			if (part === 0) continue;
			for (let row = k; row <= degree; row++) {
				matrix[row * width + power] += (part * choose[row * width + k]) / choose[degree * width + k];
			}
		}
	}
	return matrix;
}

/** Splits Bernstein coefficients at the middle (de Casteljau): `left` and `right` each take degree + 1 numbers. */
export function halve(
	values: Float64Array,
	offset: number,
	degree: number,
	left: Float64Array,
	right: Float64Array,
	into: number,
): void {
	for (let k = 0; k <= degree; k++) right[into + k] = values[offset + k];
	for (let level = 0; level < degree; level++) {
		left[into + level] = right[into];
		for (let k = 0; k < degree - level; k++) right[into + k] = (right[into + k] + right[into + k + 1]) / 2;
	}
	left[into + degree] = right[into];
}
