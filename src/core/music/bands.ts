/**
 * The sound as the first form of the analysis hears it: 48 mel bands, fifty times a second.
 * Frame i is centred on sample 441 · i of the 22.05 kHz mono signal.
 */
import { createFrameStream, createGrowing } from "../maths/index.ts";

/** Hz. Everything in this folder but loudness hears the music at this rate. */
export const HEARING_RATE = 22_050;
/** Samples between frames: fifty frames a second. */
export const HOP = 441;
export const FRAME_RATE = HEARING_RATE / HOP;
export const BAND_COUNT = 48;
const WINDOW = 1024;
const LOWEST = 30;
const HIGHEST = 10_000;

/** Level of the mel bands over time. */
export interface Bands {
	readonly frames: number;
	/** log10(1 + 1000 · magnitude); band b of frame i at i · BAND_COUNT + b. */
	readonly values: Float32Array;
	/** Hz, centre of each band. */
	readonly centres: Float64Array;
}

const toMel = (hz: number): number => 2595 * Math.log10(1 + hz / 700);
const fromMel = (mel: number): number => 700 * (10 ** (mel / 2595) - 1);

/** Hears the mel bands of a signal that comes piece by piece. */
export interface BandEar {
	/** @param mono the next samples, at HEARING_RATE */
	push(mono: Float32Array): void;
	/**
	 * @param gain what the signal is to be multiplied by, known only now that it has all been heard
	 * @returns the bands of the whole. Nothing may be pushed afterwards.
	 */
	finish(gain: number): Bands;
}

export function createBandEar(): BandEar {
	const edges = Array.from({ length: BAND_COUNT + 2 }, (_, i) =>
		fromMel(toMel(LOWEST) + ((toMel(HIGHEST) - toMel(LOWEST)) * i) / (BAND_COUNT + 1)),
	);
	// Triangles of height 1 as runs of weights over neighbouring bins.
	const bin = HEARING_RATE / WINDOW;
	const triangles = Array.from({ length: BAND_COUNT }, (_, b) => {
		const first = Math.max(0, Math.ceil(edges[b] / bin));
		const last = Math.min(WINDOW / 2, Math.floor(edges[b + 2] / bin));
		const weights = Float32Array.from({ length: Math.max(0, last - first + 1) }, (_, k) => {
			const hz = (first + k) * bin;
			return Math.max(
				0,
				Math.min((hz - edges[b]) / (edges[b + 1] - edges[b]), (edges[b + 2] - hz) / (edges[b + 2] - edges[b + 1])),
			);
		});
		return { first, weights };
	});
	const levels = createGrowing();
	let samples = 0;
	const frames = createFrameStream(
		WINDOW,
		(i) => i * HOP,
		(magnitudes) => {
			const { array, at } = levels.extend(BAND_COUNT);
			for (let b = 0; b < BAND_COUNT; b++) {
				const { first, weights } = triangles[b];
				let sum = 0;
				for (let k = 0; k < weights.length; k++) sum += weights[k] * magnitudes[first + k];
				array[at + b] = sum;
			}
		},
	);
	return {
		push: (mono) => {
			samples += mono.length;
			frames.push(mono);
		},
		finish: (gain) => {
			const count = samples === 0 ? 0 : Math.floor(samples / HOP) + 1;
			frames.finish(count);
			const values = levels.values();
			for (let k = 0; k < values.length; k++) values[k] = Math.log10(1 + 1000 * gain * values[k]);
			return { frames: count, values, centres: Float64Array.from(edges.slice(1, -1)) };
		},
	};
}
