/** Filters over the bins of a spectrum: mel bands and pitch classes, as weights of few bins each. */

/** Writes its bands of one spectrum's magnitudes into `out` from `offset` on. */
export type BandFilter = (magnitudes: Float64Array, out: Float32Array, offset: number) => void;

const toMel = (hertz: number): number => 2595 * Math.log10(1 + hertz / 700);
const toHertz = (mel: number): number => 700 * (10 ** (mel / 2595) - 1);

/**
 * Triangles evenly spaced on the mel scale (O'Shaughnessy 1987), each at least one bin wide.
 * @param frame samples of the transform
 * @param rate Hz
 */
export function createMelBands(
	frame: number,
	rate: number,
	count: number,
	lowest: number,
	highest: number,
): BandFilter {
	const bin = rate / frame;
	const edges = Array.from(
		{ length: count + 2 },
		(_, i) => toHertz(toMel(lowest) + ((toMel(highest) - toMel(lowest)) * i) / (count + 1)) / bin,
	);
	const weights = new Float64Array(count * (frame / 2 + 1));
	const first = new Int32Array(count);
	const last = new Int32Array(count);
	for (let b = 0; b < count; b++) {
		const centre = edges[b + 1];
		const left = Math.max(1, centre - edges[b]);
		const right = Math.max(1, edges[b + 2] - centre);
		first[b] = Math.max(1, Math.ceil(centre - left));
		last[b] = Math.min(frame / 2, Math.floor(centre + right));
		for (let k = first[b]; k <= last[b]; k++) {
			const distance = k < centre ? (centre - k) / left : (k - centre) / right;
			weights[b * (frame / 2 + 1) + k] = Math.max(0, 1 - distance);
		}
	}
	return (magnitudes, out, offset) => {
		for (let b = 0; b < count; b++) {
			let sum = 0;
			const row = b * (frame / 2 + 1);
			for (let k = first[b]; k <= last[b]; k++) sum += weights[row + k] * magnitudes[k];
			out[offset + b] = sum;
		}
	};
}

/**
 * Twelve pitch classes (0 = C): each bin between two MIDI pitches adds the square root of its magnitude to the nearest
 * pitch, less the further it lies from it.
 */
export function createPitchClasses(frame: number, rate: number, lowestPitch: number, highestPitch: number): BandFilter {
	const bins: { bin: number; pitchClass: number; weight: number }[] = [];
	for (let k = 1; k <= frame / 2; k++) {
		const pitch = 69 + 12 * Math.log2((k * rate) / frame / 440);
		if (pitch < lowestPitch || pitch > highestPitch) continue;
		const nearest = Math.round(pitch);
		bins.push({ bin: k, pitchClass: nearest % 12, weight: Math.exp(-(((pitch - nearest) / 0.3) ** 2)) });
	}
	return (magnitudes, out, offset) => {
		for (let c = 0; c < 12; c++) out[offset + c] = 0;
		for (const { bin, pitchClass, weight } of bins) out[offset + pitchClass] += weight * Math.sqrt(magnitudes[bin]);
		let sum = 0;
		for (let c = 0; c < 12; c++) sum += out[offset + c];
		// Shares, in units in which a spread of LEAST_SPREAD is a change worth hearing.
		if (sum > 0) for (let c = 0; c < 12; c++) out[offset + c] *= 12 / sum;
	};
}
