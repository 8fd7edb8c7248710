/**
 * Spectra of real signals. A real transform of n samples is done as a complex one of n/2 (even samples real, odd
 * samples imaginary) and taken apart afterwards (Press et al., Numerical Recipes, §12.3), which halves the work.
 */
import FFT from "fft.js";

/** Transforms of one size. Holds its own buffers: make one for each worker or call, don't share it across awaits. */
export interface RealTransform {
	/** Samples; a power of two, at least 4. */
	readonly size: number;
	/** Spectrum of `input` (size samples): bins 0 … size/2, interleaved re, im, into `out` (size + 2 values). */
	forward(input: Float64Array | Float32Array, out: Float64Array): void;
	/** |X| · scale of bins 0 … size/2 of `input` (size samples, left as they are) into `out`. */
	magnitudes(input: Float64Array, scale: number, out: Float32Array | Float64Array): void;
	/** The signal (size samples) of a spectrum as `forward` writes it, into `out`. */
	inverse(spectrum: Float64Array, out: Float64Array | Float32Array): void;
}

/** @param size samples, a power of two, at least 4 */
export function createRealTransform(size: number): RealTransform {
	const half = size / 2;
	const fft = new FFT(half);
	const packed = new Float64Array(size);
	const turned = new Float64Array(size);
	// cos and sin of 2πk/size
	const cosines = Float64Array.from({ length: half + 1 }, (_, k) => Math.cos((2 * Math.PI * k) / size));
	const sines = Float64Array.from({ length: half + 1 }, (_, k) => Math.sin((2 * Math.PI * k) / size));
	const forward = (input: Float64Array | Float32Array, out: Float64Array): void => {
		for (let i = 0; i < size; i++) packed[i] = input[i];
		fft.transform(turned, packed);
		for (let k = 0; k <= half; k++) {
			const a = k === half ? 0 : 2 * k;
			const b = k === 0 ? 0 : 2 * (half - k);
			const evenRe = (turned[a] + turned[b]) / 2;
			const evenIm = (turned[a + 1] - turned[b + 1]) / 2;
			const oddRe = (turned[a + 1] + turned[b + 1]) / 2;
			const oddIm = (turned[b] - turned[a]) / 2;
			out[2 * k] = evenRe + oddRe * cosines[k] + oddIm * sines[k];
			out[2 * k + 1] = evenIm + oddIm * cosines[k] - oddRe * sines[k];
		}
	};
	const inverse = (spectrum: Float64Array, out: Float64Array | Float32Array): void => {
		for (let k = 0; k < half; k++) {
			const a = 2 * k;
			const b = 2 * (half - k);
			const evenRe = (spectrum[a] + spectrum[b]) / 2;
			const evenIm = (spectrum[a + 1] - spectrum[b + 1]) / 2;
			const turnRe = (spectrum[a] - spectrum[b]) / 2;
			const turnIm = (spectrum[a + 1] + spectrum[b + 1]) / 2;
			const oddRe = turnRe * cosines[k] - turnIm * sines[k];
			const oddIm = turnRe * sines[k] + turnIm * cosines[k];
			packed[a] = evenRe - oddIm;
			packed[a + 1] = evenIm + oddRe;
		}
		fft.inverseTransform(turned, packed);
		for (let i = 0; i < size; i++) out[i] = turned[i];
	};
	const magnitudes = (input: Float64Array, scale: number, out: Float32Array | Float64Array): void => {
		fft.transform(turned, input);
		out[0] = Math.abs(turned[0] + turned[1]) * scale;
		out[half] = Math.abs(turned[0] - turned[1]) * scale;
		// Bins k and half − k come of the same two values: even ± turned odd part.
		for (let k = 1; k <= half >> 1; k++) {
			const a = 2 * k;
			const b = 2 * (half - k);
			const evenRe = (turned[a] + turned[b]) / 2;
			const evenIm = (turned[a + 1] - turned[b + 1]) / 2;
			const oddRe = (turned[a + 1] + turned[b + 1]) / 2;
			const oddIm = (turned[b] - turned[a]) / 2;
			const re = oddRe * cosines[k] + oddIm * sines[k];
			const im = oddIm * cosines[k] - oddRe * sines[k];
			out[k] = Math.sqrt((evenRe + re) ** 2 + (evenIm + im) ** 2) * scale;
			out[half - k] = Math.sqrt((evenRe - re) ** 2 + (evenIm - im) ** 2) * scale;
		}
	};
	return { size, forward, magnitudes, inverse };
}

/** Hann window, periodic: value i is ½ − ½ cos(2πi/size). */
export function hannWindow(size: number): Float64Array {
	return Float64Array.from({ length: size }, (_, i) => 0.5 - 0.5 * Math.cos((2 * Math.PI * i) / size));
}

/**
 * Magnitudes of Hann-windowed frames.
 * @param size samples of a frame, a power of two
 * @returns a function that writes the size/2 + 1 magnitudes of the frame centred on sample `centre` into `out`; the
 * signal is zero outside its ends. A sine of amplitude a gives a at its bin: |X| · 2 / sum of window.
 */
export function createFrameSpectrum(
	size: number,
): (signal: Float32Array, centre: number, out: Float32Array | Float64Array) => void {
	const transform = createRealTransform(size);
	const window = hannWindow(size);
	const scale = 2 / window.reduce((sum, w) => sum + w, 0);
	const frame = new Float64Array(size);
	return (signal, centre, out) => {
		const from = centre - size / 2;
		const first = Math.max(0, Math.min(size, -from));
		const last = Math.max(first, Math.min(size, signal.length - from));
		frame.fill(0, 0, first);
		for (let i = first; i < last; i++) frame[i] = signal[from + i] * window[i];
		frame.fill(0, last);
		transform.magnitudes(frame, scale, out);
	};
}

/** Frames of a signal that comes piece by piece. */
export interface FrameStream {
	/** Takes the next samples, and hands on the frames that they complete. */
	push(samples: Float32Array): void;
	/** Hands on the frames that reach past the end, up to `frames` in all. Nothing may be pushed afterwards. */
	finish(frames: number): void;
}

/**
 * Magnitudes of Hann-windowed frames of a signal that comes piece by piece, as `createFrameSpectrum` measures them.
 * @param size samples of a frame, a power of two
 * @param centreOf sample on which frame i is centred; rises with i
 * @param take called with each frame in turn; `magnitudes` (size/2 + 1 values) is used again for the next
 */
export function createFrameStream(
	size: number,
	centreOf: (frame: number) => number,
	take: (magnitudes: Float32Array, frame: number) => void,
): FrameStream {
	const measure = createFrameSpectrum(size);
	const magnitudes = new Float32Array(size / 2 + 1);
	const half = size / 2;
	const piece = 8 * size;
	// Samples base … base + count lie in `held`.
	const held = new Float32Array(piece + 2 * size);
	let base = 0;
	let count = 0;
	let frame = 0;
	const hand = (): void => {
		measure(held.subarray(0, count), centreOf(frame) - base, magnitudes);
		take(magnitudes, frame);
		frame++;
	};
	/** Lets go of what no further frame needs. */
	const slide = (): void => {
		const keep = Math.max(base, Math.min(base + count, centreOf(frame) - half));
		held.copyWithin(0, keep - base, count);
		count -= keep - base;
		base = keep;
	};
	return {
		push: (samples) => {
			for (let at = 0; at < samples.length; at += piece) {
				const part = samples.subarray(at, at + piece);
				held.set(part, count);
				count += part.length;
				while (centreOf(frame) + half <= base + count) hand();
				slide();
			}
		},
		finish: (frames) => {
			while (frame < frames) hand();
		},
	};
}
