import { describe, expect, it } from "vitest";
import { createRandom, createRealTransform, createResampler, resample } from "../../../src/core/maths/index.ts";

const sine = (hz: number, rate: number, seconds = 1): Float32Array =>
	Float32Array.from({ length: rate * seconds }, (_, i) => Math.sin((2 * Math.PI * hz * i) / rate));

const worst = (a: Float32Array, b: (i: number) => number): number => {
	let most = 0;
	// the ends are left out: the signal starts from nothing there
	for (let i = 200; i < a.length - 200; i++) most = Math.max(most, Math.abs(a[i] - b(i)));
	return most;
};

describe("change of sample rate", () => {
	it.each([
		[44_100, 22_050],
		[48_000, 22_050],
		[96_000, 22_050],
		[44_101, 22_050],
		[8_000, 22_050],
	])("%i Hz to %i Hz keeps a sine in place and in level within 0.1 %%", (from, to) => {
		for (const hz of [50, 1000, 3000]) {
			expect(worst(resample(sine(hz, from), from, to), (i) => Math.sin((2 * Math.PI * hz * i) / to))).toBeLessThan(
				1e-3,
			);
		}
	});

	it("what lies above the new band is gone: 60 dB and more", () => {
		for (const hz of [12_500, 15_000, 20_000]) {
			expect(worst(resample(sine(hz, 44_100), 44_100, 22_050), () => 0)).toBeLessThan(1e-3);
		}
	});

	it.each([
		[44_100, 22_050],
		[48_000, 22_050],
		[8_000, 22_050],
		[22_050, 22_050],
	])("%i Hz to %i Hz gives the same samples to the bit in whatever pieces the signal comes", (from, to) => {
		const random = createRandom(11);
		const signal = Float32Array.from({ length: from }, () => random.next() - 0.5);
		const whole = resample(signal, from, to);
		const resampler = createResampler(from, to);
		const parts: number[] = [];
		for (let at = 0; at < signal.length; ) {
			const next = Math.min(signal.length, at + Math.floor(random.next() ** 3 * 70_000));
			parts.push(...resampler.push(signal.subarray(at, next)));
			at = next;
		}
		parts.push(...resampler.finish());
		expect(parts.length).toBe(Math.ceil((signal.length * to) / from));
		expect(Float32Array.from(parts)).toEqual(whole);
	});

	it("the same rate copies, and nothing stays nothing", () => {
		const a = sine(300, 8000);
		expect(resample(a, 8000, 8000)).toEqual(a);
		expect(resample(new Float32Array(0), 44_100, 22_050)).toHaveLength(0);
	});
});

describe("real transform", () => {
	it("is the discrete Fourier transform by its definition, and comes back", () => {
		const random = createRandom(5);
		for (const size of [4, 8, 64]) {
			const signal = Float64Array.from({ length: size }, () => random.next() - 0.5);
			const transform = createRealTransform(size);
			const spectrum = new Float64Array(size + 2);
			transform.forward(signal, spectrum);
			for (let k = 0; k <= size / 2; k++) {
				let re = 0;
				let im = 0;
				for (let i = 0; i < size; i++) {
					re += signal[i] * Math.cos((2 * Math.PI * k * i) / size);
					im -= signal[i] * Math.sin((2 * Math.PI * k * i) / size);
				}
				expect(spectrum[2 * k]).toBeCloseTo(re, 10);
				expect(spectrum[2 * k + 1]).toBeCloseTo(im, 10);
			}
			const magnitudes = new Float64Array(size / 2 + 1);
			transform.magnitudes(signal, 3, magnitudes);
			for (let k = 0; k <= size / 2; k++) {
				expect(magnitudes[k]).toBeCloseTo(3 * Math.hypot(spectrum[2 * k], spectrum[2 * k + 1]), 10);
			}
			const back = new Float64Array(size);
			transform.inverse(spectrum, back);
			back.forEach((x, i) => {
				expect(x).toBeCloseTo(signal[i], 12);
			});
		}
	});
});
