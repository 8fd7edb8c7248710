// Fast Fourier transform, radix 2, in place: only what the reverb needs.

/** Transforms `real` and `imag` (length a power of two); `inverse` divides by the length. */
export function transform(real, imag, inverse = false) {
	const n = real.length;
	for (let i = 1, j = 0; i < n; i++) {
		let bit = n >> 1;
		for (; j & bit; bit >>= 1) j ^= bit;
		j ^= bit;
		if (i < j) {
			[real[i], real[j]] = [real[j], real[i]];
			[imag[i], imag[j]] = [imag[j], imag[i]];
		}
	}
	const sign = inverse ? 1 : -1;
	const cosines = new Float64Array(n / 2);
	const sines = new Float64Array(n / 2);
	for (let i = 0; i < n / 2; i++) {
		cosines[i] = Math.cos((2 * Math.PI * i) / n);
		sines[i] = sign * Math.sin((2 * Math.PI * i) / n);
	}
	for (let size = 2; size <= n; size *= 2) {
		const half = size / 2;
		const stride = n / size;
		for (let start = 0; start < n; start += size) {
			for (let k = 0; k < half; k++) {
				const a = start + k;
				const b = a + half;
				const cosine = cosines[k * stride];
				const sine = sines[k * stride];
				const re = real[b] * cosine - imag[b] * sine;
				const im = real[b] * sine + imag[b] * cosine;
				real[b] = real[a] - re;
				imag[b] = imag[a] - im;
				real[a] += re;
				imag[a] += im;
			}
		}
	}
	if (inverse) {
		for (let i = 0; i < n; i++) {
			real[i] /= n;
			imag[i] /= n;
		}
	}
}
