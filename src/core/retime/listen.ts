/**
 * What retiming hears of a soundtrack: a small mono copy for exact lags, and two tables of features that level,
 * equaliser, compression and codec hardly change. Each band is taken against its own mean and spread over ±3 s; what is
 * left of each frame is made a vector of length 1, so that a dot product says how alike two moments are.
 */
import type { Samples } from "../decode/index.ts";
import { createFrameSpectrum } from "../maths/index.ts";
import { createMelBands, createPitchClasses } from "./bands.ts";
import { makeSmallCopy } from "./small-copy.ts";

/** Hz of the small copy: a quarter of 44 100, so that the common case is resampled cheaply. */
export const WORK_RATE = 11025;
/** Frames a second of the fine table, which finds joints and lags. */
export const FINE_RATE = 100;
/** Frames a second of the coarse table, which finds what went where. */
export const COARSE_RATE = 20;

const FRAME = 512;
const CHROMA_FRAME = 2048;
const BANDS = 24;
const LOWEST = 60;
const HIGHEST = 5300;
const CHROMA_LOWEST_PITCH = 52;
const CHROMA_HIGHEST_PITCH = 96;
const PITCH_CLASSES = 12;
/** Seconds to either side that a band is normalised over. */
const NORMALISED_OVER = 3;
/** Share of the track's loudest level (its 95th percentile) under which nothing is heard: −60 dB. */
const SILENT_SHARE = 0.001;
/** Log level of a frame's loudest band under which it is quiet: some 50 dB under the loud parts. */
export const QUIET = 0.6;
/** And soft, like the end of a fade: 20 dB under. */
export const SOFT = 2;
/** Spread of a band, in the units of its logarithm, below which it is not blown up: noise would be heard as music. */
const LEAST_SPREAD = 0.12;
/** How alike two silent frames are: a little more than "not in the old one" costs, so that a pause doesn't break a stretch. */
const SILENCE_LIKENESS = 0.55;

/** Vectors of length 1, frame after frame. */
export interface FeatureTable {
	/** Frames a second; frame i stands at i / rate seconds. */
	readonly rate: number;
	readonly frames: number;
	readonly dimensions: number;
	/** frames × dimensions. */
	readonly values: Float64Array | Float32Array;
}

/** One soundtrack as retiming hears it. */
export interface Heard {
	readonly samples: Samples;
	/** Seconds. */
	readonly duration: number;
	/** Mono at WORK_RATE; sample i stands at i / WORK_RATE seconds. */
	readonly work: Float32Array;
	readonly fine: FeatureTable;
	readonly coarse: FeatureTable;
	/** One a fine frame: log10 of the loudest band's level over the silent one. See QUIET and SOFT. */
	readonly levels: Float32Array;
	/** True where there is nothing to hear at all. */
	readonly silent: boolean;
}

/** @param onProgress called with the share done, 0..1 */
export function listen(samples: Samples, onProgress?: (share: number) => void): Heard {
	const length = samples.channels[0]?.length ?? 0;
	const work = makeSmallCopy(samples, WORK_RATE);
	onProgress?.(0.4);
	const duration = length / samples.sampleRate;
	const frames = Math.max(1, Math.floor(duration * FINE_RATE) + 1);
	const mel = logMel(work, frames);
	onProgress?.(0.7);
	const fine = fineTable(mel.values, frames);
	const coarse = coarseTable(mel.values, frames, chroma(work, duration));
	onProgress?.(1);
	return { samples, duration, work, fine, coarse, levels: loudestBands(mel.values, frames), silent: mel.silent };
}

/** Log-mel levels, frames × BANDS; 0 is the silent level. */
function logMel(work: Float32Array, frames: number): { values: Float32Array; silent: boolean } {
	const spectrumAt = createFrameSpectrum(FRAME);
	const magnitudes = new Float64Array(FRAME / 2 + 1);
	const bands = createMelBands(FRAME, WORK_RATE, BANDS, LOWEST, HIGHEST);
	const values = new Float32Array(frames * BANDS);
	for (let f = 0; f < frames; f++) {
		spectrumAt(work, Math.round((f * WORK_RATE) / FINE_RATE), magnitudes);
		bands(magnitudes, values, f * BANDS);
	}
	// Levels against the track's own, so that gain falls out before the logarithm bends.
	const peaks = new Float32Array(Math.ceil(frames / 4));
	for (let i = 0; i < peaks.length; i++) {
		let peak = 0;
		for (let b = 0; b < BANDS; b++) peak = Math.max(peak, values[4 * i * BANDS + b]);
		peaks[i] = peak;
	}
	peaks.sort();
	const loud = peaks[Math.floor(peaks.length * 0.95)];
	const scale = loud > 0 ? 1 / (loud * SILENT_SHARE) : 0;
	for (let i = 0; i < values.length; i++) values[i] = Math.log10(1 + values[i] * scale);
	return { values, silent: loud < 1e-6 };
}

function loudestBands(mel: Float32Array, frames: number): Float32Array {
	const levels = new Float32Array(frames);
	for (let f = 0; f < frames; f++) {
		for (let b = 0; b < BANDS; b++) levels[f] = Math.max(levels[f], mel[f * BANDS + b]);
	}
	return levels;
}

/** Twelve pitch classes at COARSE_RATE, from frames of 186 ms. */
function chroma(work: Float32Array, duration: number): { values: Float32Array; frames: number } {
	const frames = Math.max(1, Math.floor(duration * COARSE_RATE) + 1);
	const spectrumAt = createFrameSpectrum(CHROMA_FRAME);
	const magnitudes = new Float64Array(CHROMA_FRAME / 2 + 1);
	const classes = createPitchClasses(CHROMA_FRAME, WORK_RATE, CHROMA_LOWEST_PITCH, CHROMA_HIGHEST_PITCH);
	const values = new Float32Array(frames * PITCH_CLASSES);
	for (let f = 0; f < frames; f++) {
		spectrumAt(work, Math.round((f * WORK_RATE) / COARSE_RATE), magnitudes);
		classes(magnitudes, values, f * PITCH_CLASSES);
	}
	return { values, frames };
}

/** Levels and their change over ±20 ms, each normalised: 2 · BANDS dimensions and one for silence. */
function fineTable(mel: Float32Array, frames: number): FeatureTable {
	const change = changeOver(mel, frames, BANDS, 2);
	return join(
		FINE_RATE,
		frames,
		[
			{ values: normalise(mel, frames, BANDS, FINE_RATE), width: BANDS, weight: 1 },
			{ values: normalise(change, frames, BANDS, FINE_RATE), width: BANDS, weight: 1 },
		],
		Float32Array,
	);
}

/** Levels smoothed over 150 ms, their change over ±100 ms and chroma: 2 · BANDS + 12 dimensions and one for silence. */
function coarseTable(
	mel: Float32Array,
	fineFrames: number,
	pitch: { values: Float32Array; frames: number },
): FeatureTable {
	const { frames } = pitch;
	const step = FINE_RATE / COARSE_RATE;
	const reach = 7;
	const smooth = new Float32Array(frames * BANDS);
	for (let f = 0; f < frames; f++) {
		let sum = 0;
		for (let k = -reach; k <= reach; k++) {
			const at = f * step + k;
			if (at < 0 || at >= fineFrames) continue;
			const weight = reach + 1 - Math.abs(k);
			sum += weight;
			for (let b = 0; b < BANDS; b++) smooth[f * BANDS + b] += weight * mel[at * BANDS + b];
		}
		for (let b = 0; b < BANDS; b++) smooth[f * BANDS + b] /= Math.max(1, sum);
	}
	const change = changeOver(smooth, frames, BANDS, 2);
	return join(
		COARSE_RATE,
		frames,
		[
			{ values: normalise(smooth, frames, BANDS, COARSE_RATE), width: BANDS, weight: 1 },
			{ values: normalise(change, frames, BANDS, COARSE_RATE), width: BANDS, weight: 1 },
			{ values: normalise(pitch.values, frames, PITCH_CLASSES, COARSE_RATE), width: PITCH_CLASSES, weight: 1.2 },
		],
		Float64Array,
	);
}

function changeOver(values: Float32Array, frames: number, width: number, reach: number): Float32Array {
	const out = new Float32Array(values.length);
	for (let f = 0; f < frames; f++) {
		const before = Math.max(0, f - reach) * width;
		const after = Math.min(frames - 1, f + reach) * width;
		for (let b = 0; b < width; b++) out[f * width + b] = values[after + b] - values[before + b];
	}
	return out;
}

/** Each band less its mean over ±3 s, divided by its spread there: running sums, one pass. */
function normalise(values: Float32Array, frames: number, width: number, rate: number): Float32Array {
	const reach = Math.round(NORMALISED_OVER * rate);
	const out = new Float32Array(values.length);
	const sum = new Float64Array(width);
	const squares = new Float64Array(width);
	let held = 0;
	const take = (frame: number, sign: number): void => {
		held += sign;
		for (let b = 0; b < width; b++) {
			const value = values[frame * width + b];
			sum[b] += sign * value;
			squares[b] += sign * value * value;
		}
	};
	for (let f = 0; f < Math.min(reach, frames); f++) take(f, 1);
	for (let f = 0; f < frames; f++) {
		if (f + reach < frames) take(f + reach, 1);
		if (f - reach - 1 >= 0) take(f - reach - 1, -1);
		for (let b = 0; b < width; b++) {
			const mean = sum[b] / held;
			const spread = Math.sqrt(Math.max(0, squares[b] / held - mean * mean));
			out[f * width + b] = (values[f * width + b] - mean) / Math.max(LEAST_SPREAD, spread);
		}
	}
	return out;
}

interface Part {
	readonly values: Float32Array;
	readonly width: number;
	readonly weight: number;
}

/** Parts side by side, made vectors of length 1; what a quiet frame lacks goes into the last dimension: silence. */
function join(
	rate: number,
	frames: number,
	parts: readonly Part[],
	Store: typeof Float32Array | typeof Float64Array,
): FeatureTable {
	const width = parts.reduce((sum, part) => sum + part.width, 0);
	const dimensions = width + 1;
	const values = new Store(frames * dimensions);
	// A frame whose bands stray less than a fifth of their usual spread says nothing.
	const floor = 0.2 * Math.sqrt(width);
	for (let f = 0; f < frames; f++) {
		const to = f * dimensions;
		let at = to;
		let squares = 0;
		for (const part of parts) {
			for (let b = 0; b < part.width; b++) {
				const value = part.weight * part.values[f * part.width + b];
				values[at++] = value;
				squares += value * value;
			}
		}
		const norm = Math.sqrt(squares);
		const scale = 1 / Math.max(norm, floor);
		for (let d = 0; d < width; d++) values[to + d] *= scale;
		const share = Math.min(1, norm / floor);
		values[to + width] = Math.sqrt((1 - share * share) * SILENCE_LIKENESS);
	}
	return { rate, frames, dimensions, values };
}

/** How alike frame i of one table and frame j of another are: −1..1. */
export function likeness(a: FeatureTable, i: number, b: FeatureTable, j: number): number {
	const { dimensions } = a;
	const from = i * dimensions;
	const to = j * dimensions;
	let sum = 0;
	for (let d = 0; d < dimensions; d++) sum += a.values[from + d] * b.values[to + d];
	return sum;
}
