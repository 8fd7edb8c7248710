import type { Bar, Curve } from "../show/index.ts";

/** Likelihood of a beat, and of a bar's first beat, over time: what the decoder of beats and bars reads. */
export interface ActivationCurves {
	/** 0..1, value i at i / rate seconds. */
	readonly beat: Float32Array;
	readonly downbeat: Float32Array;
	/** Values a second. */
	readonly rate: number;
}

/** A stretch of music with one character, bounded by bars. */
export interface MusicSection {
	/** Seconds. */
	readonly start: number;
	readonly end: number;
	/** Beat indices; `toBeat` is one past the last (beats.length at the end). */
	readonly fromBeat: number;
	readonly toBeat: number;
	/** Same letter: same music. */
	readonly letter: string;
}

/** A place in the music that asks for something. */
export interface Moment {
	readonly kind: "drop" | "build" | "break" | "hit";
	readonly beat: number;
	/** 0..1 */
	readonly strength: number;
}

/** Everything the tool hears in a soundtrack. Plain data and typed arrays: it crosses to a worker as it is. */
export interface Analysis {
	/** Rises whenever the same samples would give another answer: part of the cache's key. */
	readonly version: number;
	/** Seconds, Hz. */
	readonly duration: number;
	readonly sampleRate: number;
	readonly channels: number;
	readonly tempo: { readonly bpm: number };
	/** Seconds, strictly rising; empty where no beat was found. */
	readonly beats: Float64Array;
	/** 0..1 for each beat. */
	readonly beatConfidence: Float32Array;
	/** One entry for every bar. */
	readonly bars: readonly Bar[];
	readonly sections: readonly MusicSection[];
	/** The same music divided from coarse to fine, one entry for each of SECTION_DETAILS. */
	readonly sectionLevels: readonly (readonly MusicSection[])[];
	readonly moments: readonly Moment[];
	/** 0..1 for the whole. */
	readonly confidence: number;
	/** LUFS. Value i of `momentary` and `shortTerm` is the window that ends at (i + 1) / rate seconds. */
	readonly loudness: {
		readonly integrated: number;
		readonly momentary: Float32Array;
		readonly shortTerm: Float32Array;
		readonly rate: number;
	};
	/** loudness, low, middle, high, onset: each 0..1. */
	readonly curves: readonly Curve[];
	/** Waveform for drawing: lowest and highest sample of each 1/rate s, interleaved. */
	readonly peaks: { readonly values: Float32Array; readonly rate: number };
	/** What the user should know: "no beat was found: the music is silent". */
	readonly notes: readonly string[];
}

/** What the analysis listens to: decoded audio, of which it needs no more than this. */
export interface Sound {
	/** Hz. */
	readonly sampleRate: number;
	/** One array a channel, −1..1, all of the same length. */
	readonly channels: readonly Float32Array[];
}
