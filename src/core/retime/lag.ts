/**
 * How far off a guess is, measured at one place. By features: good to a few milliseconds, whatever was done to the
 * sound, at any rate. By phase (GCC-PHAT, Knapp and Carter 1976): good to a fraction of a sample, where the waveform
 * survived; the old window is resampled by the rate found so far, or a change of tempo would smear the peak.
 */
import { createRealTransform, hannWindow } from "../maths/index.ts";
import type { Line, Point } from "./line.ts";
import { oldOn } from "./line.ts";
import { type FeatureTable, FINE_RATE, WORK_RATE } from "./listen.ts";

/**
 * @param time new seconds of the window's middle
 * @param reach seconds to either side that are compared
 * @param within seconds that the guess may be off
 * @param stride frames of the window that are taken: every one, or every second for a first look
 * @returns null where the window leaves either soundtrack by more than half, or nothing stands out
 */
export function measureByFeatures(
	old: FeatureTable,
	current: FeatureTable,
	guess: Line,
	time: number,
	reach: number,
	within: number,
	stride = 1,
): Point | null {
	const { dimensions } = current;
	const lags = Math.round(within * FINE_RATE);
	const scores = new Float64Array(2 * lags + 1);
	const half = Math.round(reach * FINE_RATE);
	const centre = Math.round(time * FINE_RATE);
	let used = 0;
	let rounding = 0;
	for (let k = -half; k <= half; k += stride) {
		const frame = centre + k;
		const exact = oldOn(guess, frame / FINE_RATE) * FINE_RATE;
		const from = Math.round(exact);
		if (frame < 0 || frame >= current.frames || from < lags || from + lags >= old.frames) continue;
		used++;
		rounding += from - exact;
		const a = frame * dimensions;
		for (let lag = -lags; lag <= lags; lag++) {
			const b = (from + lag) * dimensions;
			let sum = 0;
			for (let d = 0; d < dimensions; d++) sum += current.values[a + d] * old.values[b + d];
			scores[lag + lags] += sum;
		}
	}
	if (used * stride < half) return null;
	let peak = 0;
	for (let i = 1; i < scores.length; i++) if (scores[i] > scores[peak]) peak = i;
	if (peak === 0 || peak === scores.length - 1) return null;
	const lag = peak - lags + peakOffset(scores[peak - 1], scores[peak], scores[peak + 1]) + rounding / used;
	const at = centre / FINE_RATE;
	return { new: at, old: oldOn(guess, at) + lag / FINE_RATE, quality: Math.max(0.01, scores[peak] / used) };
}

/** Where a parabola through three values has its top, in steps from the middle one. */
function peakOffset(before: number, top: number, after: number): number {
	const bend = before - 2 * top + after;
	return bend < 0 ? Math.max(-0.5, Math.min(0.5, (0.5 * (before - after)) / bend)) : 0;
}

/** Measures lags of waveforms; holds the buffers of one window length. */
export interface PhaseMeter {
	/**
	 * @param within seconds that the guess may be off
	 * @returns null where there is nothing to hear or the window leaves either soundtrack
	 */
	measure(old: Float32Array, current: Float32Array, guess: Line, time: number, within: number): Point | null;
}

/** @param size samples of the window at WORK_RATE, a power of two */
export function createPhaseMeter(size: number): PhaseMeter {
	const transform = createRealTransform(size);
	const window = hannWindow(size);
	const a = new Float64Array(size);
	const b = new Float64Array(size);
	const left = new Float64Array(size + 2);
	const right = new Float64Array(size + 2);
	const correlation = new Float64Array(size);
	return {
		measure(old, current, guess, time, within) {
			const centre = Math.round(time * WORK_RATE);
			const from = centre - size / 2;
			const at = centre / WORK_RATE;
			// The old sample that belongs to the window's middle: the guess rounded, so that rate 1 needs no resampling.
			const oldCentre = Math.round(oldOn(guess, at) * WORK_RATE);
			const span = Math.ceil((size / 2) * guess.rate) + 2;
			if (from < 0 || from + size > current.length || oldCentre < span || oldCentre + span >= old.length) return null;
			let energyA = 0;
			let energyB = 0;
			for (let i = 0; i < size; i++) {
				a[i] = current[from + i] * window[i];
				const position = oldCentre + (i - size / 2) * guess.rate;
				const whole = Math.floor(position);
				const part = position - whole;
				b[i] = (part === 0 ? old[whole] : cubic(old, whole, part)) * window[i];
				energyA += a[i] * a[i];
				energyB += b[i] * b[i];
			}
			if (energyA < 1e-7 * size || energyB < 1e-7 * size) return null;
			transform.forward(a, left);
			transform.forward(b, right);
			whiten(left, right, size);
			transform.inverse(left, correlation);
			const reach = Math.min(size / 2 - 2, Math.max(2, Math.ceil(within * WORK_RATE)));
			let peak = -reach;
			const value = (lag: number): number => correlation[(lag + size) % size];
			for (let lag = -reach; lag <= reach; lag++) if (value(lag) > value(peak)) peak = lag;
			const offset = peakOffset(value(peak - 1), value(peak), value(peak + 1));
			// correlation at lag d: current(i) meets old(i − d), so the old place lies d samples earlier.
			const lag = -(peak + offset) * guess.rate;
			return { new: at, old: (oldCentre + lag) / WORK_RATE, quality: Math.min(1, Math.max(0.001, value(peak))) };
		},
	};
}

/**
 * left ← left · conj(right), each bin of length 1 where both have something to say; bins far under the spectra's mean are
 * left weak, so that noise doesn't vote.
 */
function whiten(left: Float64Array, right: Float64Array, size: number): void {
	let mean = 0;
	const bins = size / 2;
	for (let k = 0; k <= bins; k++) {
		const re = left[2 * k] * right[2 * k] + left[2 * k + 1] * right[2 * k + 1];
		const im = left[2 * k + 1] * right[2 * k] - left[2 * k] * right[2 * k + 1];
		left[2 * k] = re;
		left[2 * k + 1] = im;
		mean += Math.hypot(re, im);
	}
	const floor = (0.01 * mean) / (bins + 1);
	// The sum of all bins at lag 0 is 1 where every one agrees.
	for (let k = 0; k <= bins; k++) {
		const scale = 1 / (Math.hypot(left[2 * k], left[2 * k + 1]) + floor);
		left[2 * k] *= scale;
		left[2 * k + 1] *= scale;
	}
}

/** Catmull-Rom between samples: enough for a measure of lag. */
function cubic(x: Float32Array, i: number, t: number): number {
	const p0 = x[i - 1];
	const p1 = x[i];
	const p2 = x[i + 1];
	const p3 = x[i + 2];
	return p1 + 0.5 * t * (p2 - p0 + t * (2 * p0 - 5 * p1 + 4 * p2 - p3 + t * (3 * (p1 - p2) + p3 - p0)));
}
