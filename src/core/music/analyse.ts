/** Samples → everything the tool hears in a soundtrack. */
import { StarstaveError } from "../units/index.ts";
import type { Analysis, MusicSection, Sound } from "./analysis.ts";
import { type Bands, FRAME_RATE } from "./bands.ts";
import { drawCurves } from "./curves.ts";
import { type BarLikeness, compareBars } from "./describe-bars.ts";
import { findBoundaries } from "./find-sections.ts";
import { spectralFlux } from "./flux.ts";
import { followBeats } from "./follow-beats.ts";
import { createListener, type Heard, type Listener } from "./listen.ts";
import type { Loudness } from "./loudness.ts";
import { findMoments } from "./moments.ts";
import { nameSections } from "./name-sections.ts";
import { networkActivation } from "./network/index.ts";
import { type PlacedBeats, placeBeats } from "./place-beats.ts";

/** Rises whenever the same samples would give another answer. */
export const ANALYSIS_VERSION = 3;

/** How fine sections are, from coarse to fine: all are kept, so that turning detail up asks for no new analysis. */
export const SECTION_DETAILS = [0, 0.25, 0.5, 0.75, 1] as const;

/** LU below the integrated loudness (and LUFS at all) under which there is nothing to beat time to. */
const QUIET = -35;
/** Confidence below which beats are given only with a word of caution, and none at all. */
export const DOUBTFUL = 0.35;
const NO_BEAT = 0.12;

export interface AnalyseOptions {
	/** Called with 0..1 and what is being done, at least twenty times a track. */
	readonly onProgress?: (share: number, stage: string) => void;
	/** How fine the sections are, 0 (coarse) to 1 (fine); ½ unless told. */
	readonly detail?: number;
}

const NOTHING = "The soundtrack holds no samples, so there is nothing to analyse.";
/** Samples of a channel that are listened to at a time. */
const PIECE = 1 << 17;
/** Share of the whole time that the first pass over the sound takes. */
const LISTENING = 0.4;

/**
 * Listens to a whole soundtrack: beats, bars, sections, loudness, curves, moments.
 * The same samples give the same answer anywhere.
 * @throws StarstaveError where there are no samples
 */
export function analyse(sound: Sound, options: AnalyseOptions = {}): Analysis {
	const { channels, sampleRate } = sound;
	const length = channels[0]?.length ?? 0;
	if (length === 0 || !(sampleRate > 0)) throw new StarstaveError("soundtrack", NOTHING);
	const listen = (alone: number | null): Heard => {
		const listener = createListener(sampleRate, channels.length, alone);
		for (let at = 0; at < length; at += PIECE) {
			options.onProgress?.((LISTENING * at) / length, "listening");
			listener.push(channels.map((channel) => channel.subarray(at, at + PIECE)));
		}
		return listener.finish();
	};
	const heard = listen(null);
	return conclude(heard.alone === null ? heard : listen(heard.alone), options);
}

/** A piece of a soundtrack that comes piece by piece. */
export interface SoundPiece extends Sound {
	/** How much of the whole has come with it, 0..1. */
	readonly share: number;
}

/**
 * The same of a soundtrack that comes piece by piece and is never held as a whole: half an hour of stereo in the room of
 * its bands.
 * @param open begins the soundtrack anew; asked for a second time where the channels cancel in their mean
 * @throws StarstaveError where there are no samples
 */
export async function analysePieces(
	open: () => AsyncIterable<SoundPiece>,
	options: AnalyseOptions = {},
): Promise<Analysis> {
	const listen = async (alone: number | null): Promise<Heard> => {
		let listener: Listener | null = null;
		for await (const { channels, sampleRate, share } of open()) {
			listener ??= createListener(sampleRate, channels.length, alone);
			listener.push(channels);
			options.onProgress?.(LISTENING * share, "listening");
		}
		if (listener === null) throw new StarstaveError("soundtrack", NOTHING);
		return listener.finish();
	};
	const heard = await listen(null);
	return conclude(heard.alone === null ? heard : await listen(heard.alone), options);
}

/** From what was heard to what it means. */
function conclude(heard: Heard, options: AnalyseOptions): Analysis {
	const { sampleRate, loudness, bands, harmony } = heard;
	const tell = options.onProgress ?? (() => {});
	const within = (from: number, to: number, stage: string) => (share: number) =>
		tell(from + (to - from) * share, stage);
	const duration = heard.length / sampleRate;
	const activation = networkActivation(bands, harmony, within(LISTENING, 0.85, "beats"));
	const walk = followBeats(activation, harmony, within(0.85, 0.95, "beats"));
	const notes: string[] = [];
	const sounding = findSound(loudness);
	const beats = placeBeats(activation, walk, soundingNear(sounding, loudness.rate), onsetNear(bands));
	const placed = judge(beats, loudness, sounding, notes);
	tell(0.95, "sections");
	const curves = drawCurves(bands, loudness);
	const edges = placed.bars.length > 0 ? barEdges(placed, duration) : new Float64Array(0);
	const likeness = compareBars(bands, harmony, edges);
	const sections = divide(placed, likeness, edges, options.detail ?? 0.5);
	const sectionLevels = SECTION_DETAILS.map((detail) => divide(placed, likeness, edges, detail));
	const momentary = { values: loudness.momentary, rate: loudness.rate };
	const moments = findMoments(placed.beats, placed.bars, momentary, curves);
	tell(1, "done");
	return {
		version: ANALYSIS_VERSION,
		duration,
		sampleRate,
		channels: heard.channels,
		tempo: { bpm: tempoOf(placed.beats) },
		beats: placed.beats,
		beatConfidence: placed.confidence,
		bars: placed.bars,
		sections,
		sectionLevels,
		moments,
		confidence: placed.overall,
		loudness,
		curves,
		peaks: heard.peaks,
		notes,
	};
}

const meanOf = (values: Float32Array): number =>
	values.length === 0 ? 0 : values.reduce((sum, x) => sum + x, 0) / values.length;

/** Which tenths of a second hold sound. A momentary window looks back 0.4 s, so the newest of them tells first. */
function findSound(loudness: Loudness): Uint8Array {
	const gate = Math.max(-70, loudness.integrated + QUIET);
	return Uint8Array.from(loudness.momentary, (x) => (x > gate ? 1 : 0));
}

/** Whether anything sounds from half a second before a time to a quarter after. */
function soundingNear(sound: Uint8Array, rate: number): (time: number) => boolean {
	return (time) => {
		const last = Math.min(sound.length - 1, Math.round((time + 0.25) * rate));
		for (let i = Math.max(0, Math.round((time - 0.5) * rate)); i <= last; i++) if (sound[i] === 1) return true;
		return false;
	};
}

/** How much the bands rise from a tenth of a second before a time to a tenth after, at most in one frame. */
function onsetNear(bands: Bands): (time: number) => number {
	const flux = spectralFlux(bands);
	return (time) => {
		let most = 0;
		const from = Math.max(0, Math.round((time - 0.1) * FRAME_RATE));
		const to = Math.min(flux.length - 1, Math.round((time + 0.1) * FRAME_RATE));
		for (let i = from; i <= to; i++) most = Math.max(most, flux[i]);
		return most;
	};
}

/** Share of the sound that lies between the first beat and the last. */
function coverOf(beats: Float64Array, sound: Uint8Array, rate: number): number {
	if (beats.length < 2) return 0;
	let heard = 0;
	let covered = 0;
	const interval = beats[1] - beats[0];
	for (let i = 0; i < sound.length; i++) {
		if (sound[i] === 0) continue;
		heard++;
		if (i / rate >= beats[0] - interval && i / rate <= beats[beats.length - 1] + interval) covered++;
	}
	return heard > 0 ? covered / heard : 0;
}

/** Says honestly how far the beats can be trusted, and gives none where they can't be. */
function judge(
	placed: PlacedBeats,
	loudness: Loudness,
	sound: Uint8Array,
	notes: string[],
): PlacedBeats & { overall: number } {
	const none = { beats: new Float64Array(0), confidence: new Float32Array(0), bars: [], overall: 0 };
	if (sound.every((x) => x === 0)) {
		notes.push("No beat was found: the soundtrack is silent.");
		return none;
	}
	// A few beats here and there in half a minute of noise are no pulse, however clear each of them is.
	const overall = meanOf(placed.confidence) * coverOf(placed.beats, sound, loudness.rate);
	if (placed.beats.length < 4 || overall < NO_BEAT) {
		notes.push("No beat was found: nothing in the sound keeps time.");
		return none;
	}
	if (overall < DOUBTFUL) notes.push("The beat is uncertain: listen to it with the click before placing cues.");
	return { ...placed, overall };
}

/** Beats a minute: the median of the intervals, 0 without beats. */
function tempoOf(beats: Float64Array): number {
	if (beats.length < 2) return 0;
	const intervals = beats.slice(1).map((time, i) => time - beats[i]);
	intervals.sort();
	return 60 / intervals[Math.floor(intervals.length / 2)];
}

/** Seconds at which each bar starts, and where the last one ends. */
function barEdges({ beats, bars }: PlacedBeats, duration: number): Float64Array {
	const last = beats.length - 1;
	const end = Math.min(duration, beats[last] + (last > 0 ? beats[last] - beats[last - 1] : 1));
	return Float64Array.from([...bars.map((bar) => beats[bar.beat]), end]);
}

/** Sections with their letters, from the first beat to the last. */
function divide(placed: PlacedBeats, likeness: BarLikeness, edges: Float64Array, detail: number): MusicSection[] {
	const starts = findBoundaries(likeness, detail);
	const letters = nameSections(likeness, starts);
	return starts.map((bar, i) => {
		const next = starts[i + 1];
		// A pickup before the first bar belongs to the first section.
		const fromBeat = i === 0 ? 0 : placed.bars[bar].beat;
		return {
			start: i === 0 ? placed.beats[0] : edges[bar],
			end: next === undefined ? edges[edges.length - 1] : edges[next],
			fromBeat,
			toBeat: next === undefined ? placed.beats.length : placed.bars[next].beat,
			letter: letters[i],
		};
	});
}
