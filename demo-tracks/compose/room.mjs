// The room: reverb by convolution with a made-up impulse response, and a ping-pong echo.

import { transform } from "./fourier.mjs";
import { seeded } from "./random.mjs";
import { Filter, RATE } from "./sound.mjs";

/**
 * Impulse response of a hall, one a side: a few early reflections, then noise that decays to −60 dB in `seconds`,
 * its treble (above `damp` Hz) sooner than its bass, as air and cloth have it (Moorer 1979 used noise like this).
 */
function hall({ seconds, damp, before, seed }) {
	const samples = Math.round(seconds * 1.1 * RATE);
	return [0, 1].map((side) => {
		const random = seeded(seed + side * 7919);
		const response = new Float64Array(samples);
		const shade = new Filter(12000, 0.6);
		const thin = new Filter(160, 0.7);
		const first = Math.round(before * RATE);
		for (let i = first; i < samples; i++) {
			const t = (i - first) / RATE;
			if ((i - first) % 64 === 0) shade.tune(damp * 0.25 + damp * 2.2 * Math.exp((-3 * t) / seconds));
			const grown = 1 - Math.exp(-t / 0.018);
			thin.run(shade.run(2 * random() - 1));
			response[i] = thin.high * grown * 10 ** ((-3 * t) / seconds);
		}
		for (let tap = 0; tap < 9; tap++) {
			const at = Math.round((before * 0.5 + 0.004 + 0.055 * random()) * RATE);
			response[at] += (random() < 0.5 ? -1 : 1) * 2.2 * Math.exp(-tap / 6);
		}
		let power = 0;
		for (const value of response) power += value * value;
		const scale = 1 / Math.sqrt(power);
		return response.map((value) => value * scale);
	});
}

/** Answers the reverb of a stereo signal, same length: overlap-add, both sides in one complex transform. */
export function reverberate(left, right, { seconds = 2.4, damp = 4200, before = 0.018, seed = 1 } = {}) {
	const [responseLeft, responseRight] = hall({ seconds, damp, before, seed });
	const size = 2 ** Math.ceil(Math.log2(responseLeft.length * 2));
	const block = size - responseLeft.length;
	const kernels = [responseLeft, responseRight].map((response) => {
		const real = new Float64Array(size);
		real.set(response);
		const imag = new Float64Array(size);
		transform(real, imag);
		return { real, imag };
	});
	const [kernelLeft, kernelRight] = kernels;
	const wet = { left: new Float32Array(left.length), right: new Float32Array(left.length) };
	for (let from = 0; from < left.length; from += block) {
		const real = new Float64Array(size);
		const imag = new Float64Array(size);
		real.set(left.subarray(from, from + block));
		imag.set(right.subarray(from, from + block));
		transform(real, imag);
		multiplyPair(real, imag, kernelLeft, kernelRight);
		transform(real, imag, true);
		const last = Math.min(size, left.length - from);
		for (let i = 0; i < last; i++) {
			wet.left[from + i] += real[i];
			wet.right[from + i] += imag[i];
		}
	}
	return wet;
}

/** Left is the real part, right the imaginary part of one signal: take their spectra apart, filter, put together. */
function multiplyPair(real, imag, a, b) {
	const n = real.length;
	for (let k = 0; k <= n / 2; k++) {
		const m = (n - k) % n;
		const leftRe = (real[k] + real[m]) / 2;
		const leftIm = (imag[k] - imag[m]) / 2;
		const rightRe = (imag[k] + imag[m]) / 2;
		const rightIm = (real[m] - real[k]) / 2;
		const outLeftRe = leftRe * a.real[k] - leftIm * a.imag[k];
		const outLeftIm = leftRe * a.imag[k] + leftIm * a.real[k];
		const outRightRe = rightRe * b.real[k] - rightIm * b.imag[k];
		const outRightIm = rightRe * b.imag[k] + rightIm * b.real[k];
		real[k] = outLeftRe - outRightIm;
		imag[k] = outLeftIm + outRightRe;
		real[m] = outLeftRe + outRightIm;
		imag[m] = outRightRe - outLeftIm;
	}
}

/** Echoes that cross from side to side every `seconds`, each softer and darker; the dry sound is not in the answer. */
export function echo(left, right, { seconds, feedback = 0.42, shade = 3200 }) {
	const length = Math.max(1, Math.round(seconds * RATE));
	const out = { left: new Float32Array(left.length), right: new Float32Array(left.length) };
	const first = new Filter(shade, 0.6);
	const second = new Filter(shade, 0.6);
	const thin = [new Filter(260, 0.7), new Filter(260, 0.7)];
	for (let i = length; i < left.length; i++) {
		const mono = 0.5 * (left[i - length] + right[i - length]);
		out.left[i] = first.run(mono + feedback * out.right[i - length]);
		out.right[i] = second.run(out.left[i - length]);
		thin[0].run(out.left[i]);
		thin[1].run(out.right[i]);
		out.left[i] = thin[0].high;
		out.right[i] = thin[1].high;
	}
	return out;
}
