/**
 * The sound as the first form of the analysis hears it: 48 mel bands, fifty times a second.
 * Frame i is centred on sample 441 · i of the 22.05 kHz mono signal.
 */
import { createFrameSpectrum } from "../maths/index.ts";

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

/** @param mono samples at HEARING_RATE */
export function hearBands(mono: Float32Array, onProgress?: (share: number) => void): Bands {
	const frames = mono.length === 0 ? 0 : Math.floor(mono.length / HOP) + 1;
	const edges = Array.from({ length: BAND_COUNT + 2 }, (_, i) =>
		fromMel(toMel(LOWEST) + ((toMel(HIGHEST) - toMel(LOWEST)) * i) / (BAND_COUNT + 1)),
	);
	const values = new Float32Array(frames * BAND_COUNT);
	const magnitudes = new Float32Array(WINDOW / 2 + 1);
	const measure = createFrameSpectrum(WINDOW);
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
	for (let i = 0; i < frames; i++) {
		measure(mono, i * HOP, magnitudes);
		for (let b = 0; b < BAND_COUNT; b++) {
			const { first, weights } = triangles[b];
			let sum = 0;
			for (let k = 0; k < weights.length; k++) sum += weights[k] * magnitudes[first + k];
			values[i * BAND_COUNT + b] = Math.log10(1 + 1000 * sum);
		}
		if (onProgress && i % 1000 === 0) onProgress(i / frames);
	}
	return { frames, values, centres: Float64Array.from(edges.slice(1, -1)) };
}
