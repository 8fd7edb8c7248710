/**
 * Chroma: how much of each of the twelve pitch classes sounds, in a middle and a bass register, 25 times a second.
 * The signal is brought down to 5.5 kHz first: nothing above the middle register is wanted, and a window of the same
 * length costs a quarter.
 */
import { createFrameStream, createGrowing, createResampler } from "../maths/index.ts";
import { HEARING_RATE } from "./bands.ts";

export const CHROMA_SIZE = 24;
export const CHROMA_RATE = 25;
const LOWERED = 4;
const LOW_RATE = HEARING_RATE / LOWERED;
/** Zero crossings of the filter that lowers the rate: what folds lies above 2.1 kHz, where the middle register ends. */
const CROSSINGS = 8;
const WINDOW = 1024;
/** MIDI note numbers, inclusive: middle register, bass register. */
const REGISTERS = [
	[50, 96],
	[28, 52],
] as const;
/** Semitones: how far a spectral line may lie from a note and still count, as a Gaussian's spread. */
const SPREAD = 0.25;

/** Chroma over time; frame i at i / CHROMA_RATE seconds, middle register 0–11 (C first), bass register 12–23. */
export interface Harmony {
	readonly frames: number;
	readonly values: Float32Array;
}

/** Hears the chroma of a signal that comes piece by piece. */
export interface HarmonyEar {
	/** @param mono the next samples, at HEARING_RATE */
	push(mono: Float32Array): void;
	/**
	 * @param gain what the signal is to be multiplied by, known only now that it has all been heard
	 * @returns the chroma of the whole. Nothing may be pushed afterwards.
	 */
	finish(gain: number): Harmony;
}

/** Which bin feeds which row, with what weight: each row's weights sum to 1. */
function weighBins(): { binOf: Int32Array; rowOf: Int32Array; weightOf: Float32Array } {
	const bins: number[] = [];
	const rows: number[] = [];
	const weights: number[] = [];
	const totals = new Float64Array(CHROMA_SIZE);
	REGISTERS.forEach(([from, to], register) => {
		for (let bin = 1; bin < WINDOW / 2; bin++) {
			const pitch = 69 + 12 * Math.log2((bin * LOW_RATE) / WINDOW / 440);
			for (let note = from; note <= to; note++) {
				const weight = Math.exp(-0.5 * ((pitch - note) / SPREAD) ** 2);
				if (weight < 1e-3) continue;
				bins.push(bin);
				rows.push(12 * register + (note % 12));
				weights.push(weight);
				totals[12 * register + (note % 12)] += weight;
			}
		}
	});
	return {
		binOf: Int32Array.from(bins),
		rowOf: Int32Array.from(rows),
		weightOf: Float32Array.from(weights, (w, k) => w / totals[rows[k]]),
	};
}

export function createHarmonyEar(): HarmonyEar {
	const { binOf, rowOf, weightOf } = weighBins();
	const lower = createResampler(LOWERED, 1, CROSSINGS);
	const rows = createGrowing();
	let samples = 0;
	const frames = createFrameStream(
		WINDOW,
		(i) => Math.round((i * LOW_RATE) / CHROMA_RATE),
		(magnitudes) => {
			for (let k = 0; k < magnitudes.length; k++) magnitudes[k] = Math.sqrt(magnitudes[k]);
			const { array, at } = rows.extend(CHROMA_SIZE);
			for (let k = 0; k < binOf.length; k++) array[at + rowOf[k]] += weightOf[k] * magnitudes[binOf[k]];
		},
	);
	return {
		push: (mono) => {
			samples += mono.length;
			frames.push(lower.push(mono));
		},
		finish: (gain) => {
			frames.push(lower.finish());
			const count = samples === 0 ? 0 : Math.floor((samples / HEARING_RATE) * CHROMA_RATE) + 1;
			frames.finish(count);
			const values = rows.values();
			// Of magnitudes the square roots were gathered, so of the gain too.
			const root = Math.sqrt(gain);
			for (let k = 0; k < values.length; k++) values[k] = Math.log1p(20 * root * values[k]);
			return { frames: count, values };
		},
	};
}

/** Mean chroma of each stretch between times that rise: times.length − 1 rows of CHROMA_SIZE. */
export function chromaBetween(harmony: Harmony, times: Float64Array): Float32Array {
	const count = Math.max(0, times.length - 1);
	const means = new Float32Array(count * CHROMA_SIZE);
	for (let k = 0; k < count; k++) {
		const from = Math.max(0, Math.min(harmony.frames - 1, Math.round(times[k] * CHROMA_RATE)));
		const to = Math.max(from + 1, Math.min(harmony.frames, Math.round(times[k + 1] * CHROMA_RATE)));
		for (let i = from; i < to; i++) {
			for (let row = 0; row < CHROMA_SIZE; row++) {
				means[k * CHROMA_SIZE + row] += harmony.values[i * CHROMA_SIZE + row] / (to - from);
			}
		}
	}
	return means;
}

/**
 * How much the harmony changes at each beat: the chroma of the two beats after against the two before, as a z-score
 * over the track. Chords change on a bar's first beat more than anywhere else.
 */
export function harmonicChange(harmony: Harmony, beats: Float64Array): Float64Array {
	const count = beats.length;
	const change = new Float64Array(count);
	const chroma = chromaBetween(harmony, beats);
	for (let k = 1; k + 1 < count; k++) {
		let [dot, before, after] = [0, 0, 0];
		for (let row = 0; row < CHROMA_SIZE; row++) {
			const rowAt = (beat: number): number => chroma[Math.max(0, Math.min(count - 2, beat)) * CHROMA_SIZE + row];
			const a = rowAt(k - 1) + (k >= 2 ? rowAt(k - 2) : 0);
			const b = rowAt(k) + rowAt(k + 1);
			dot += a * b;
			before += a * a;
			after += b * b;
		}
		change[k] = before > 0 && after > 0 ? 1 - dot / Math.sqrt(before * after) : 0;
	}
	let mean = 0;
	let square = 0;
	for (const x of change) {
		mean += x / count;
		square += (x * x) / count;
	}
	const spread = Math.sqrt(Math.max(1e-8, square - mean * mean));
	return change.map((x) => Math.max(-3, Math.min(3, (x - mean) / spread)));
}
