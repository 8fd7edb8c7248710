/**
 * Beat activation from multi-band spectral flux: how much each band's level rises, against the highest of its
 * neighbourhood a moment before, so that vibrato is no onset (Böck and Widmer, SuperFlux, 2013).
 */
import type { ActivationCurves } from "./analysis.ts";
import { BAND_COUNT, type Bands, FRAME_RATE } from "./bands.ts";

/** Frames back that a rise is measured against. */
const LAG = 2;
/** Seconds on either side over which an onset's strength is judged. */
const AROUND = 4;
/** Bands that count as bass, where a bar's first beat shows most. */
const BASS_BANDS = 6;
/** Rise of the mean band in log10 units below which nothing is an onset: silence and hiss stay quiet. */
const FLOOR = 0.02;

/** Mean rise of `from` … `to` bands, frame by frame. */
export function spectralFlux(bands: Bands, from = 0, to = BAND_COUNT): Float32Array {
	const flux = new Float32Array(bands.frames);
	const { values } = bands;
	for (let i = LAG; i < bands.frames; i++) {
		const now = i * BAND_COUNT;
		const before = (i - LAG) * BAND_COUNT;
		let sum = 0;
		for (let b = from; b < to; b++) {
			let high = values[before + b];
			if (b > 0 && values[before + b - 1] > high) high = values[before + b - 1];
			if (b + 1 < BAND_COUNT && values[before + b + 1] > high) high = values[before + b + 1];
			const rise = values[now + b] - high;
			if (rise > 0) sum += rise;
		}
		flux[i] = sum / (to - from);
	}
	return flux;
}

/** The curve in units of its own spread over a few seconds around, above its mean there. */
function standOut(curve: Float32Array): Float32Array {
	const n = curve.length;
	const reach = Math.round(AROUND * FRAME_RATE);
	const sums = new Float64Array(n + 1);
	const squares = new Float64Array(n + 1);
	for (let i = 0; i < n; i++) {
		sums[i + 1] = sums[i] + curve[i];
		squares[i + 1] = squares[i] + curve[i] * curve[i];
	}
	return curve.map((x, i) => {
		const from = Math.max(0, i - reach);
		const to = Math.min(n, i + reach + 1);
		const mean = (sums[to] - sums[from]) / (to - from);
		const variance = (squares[to] - squares[from]) / (to - from) - mean * mean;
		return (x - mean) / Math.sqrt(Math.max(0, variance) + FLOOR * FLOOR);
	});
}

const sigmoid = (x: number): number => 1 / (1 + Math.exp(-x));

/** Likelihood of beat and downbeat from the bands alone. */
export function fluxActivation(bands: Bands): ActivationCurves {
	const all = standOut(spectralFlux(bands));
	const bass = standOut(spectralFlux(bands, 0, BASS_BANDS));
	const beat = all.map((z, i) => sigmoid(1.6 * (z + 0.5 * bass[i] - 2)));
	const downbeat = beat.map((p, i) => p * sigmoid(1.2 * (bass[i] - 2)));
	return { beat, downbeat, rate: FRAME_RATE };
}
