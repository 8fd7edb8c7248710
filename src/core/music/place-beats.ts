/** From a walk of the bar pointer to beats: moved onto the sound's own onsets, trimmed to the music, with confidence. */
import type { Bar } from "../show/index.ts";
import type { ActivationCurves } from "./analysis.ts";
import type { BarWalk } from "./follow-beats.ts";

/** Seconds that a beat may move to the activation's peak. */
const SNAP = 0.045;
/** Seconds that the activation's peaks lie behind the notes: median over rendered songs whose notes are known. */
const LATE = 0.0035;
/** Activation below which a peak is no evidence of where a beat lies. */
const LEAST_PEAK = 0.08;
/** Share of the track's middle peak that the first and the last beat must reach. */
const EVIDENCE = 0.35;
/** Share of the track's middle onset that the first and the last beat must bring: a chord that dies away brings none. */
const STRUCK = 0.1;
/** Most beats that count as an echo. */
const ECHO = 6;
/** Beats on either side over which confidence is judged. */
const AROUND = 4;

/** Beats and bars of a soundtrack. */
export interface PlacedBeats {
	/** Seconds, strictly rising. */
	readonly beats: Float64Array;
	/** 0..1 for each beat. */
	readonly confidence: Float32Array;
	readonly bars: readonly Bar[];
}

/** Seconds of the activation's peak near `time`, by a parabola through its three highest values; null without one. */
function peakNear(activation: ActivationCurves, time: number): { time: number; height: number } | null {
	const { beat, rate } = activation;
	const from = Math.max(1, Math.ceil((time - SNAP) * rate));
	const to = Math.min(beat.length - 2, Math.floor((time + SNAP) * rate));
	let peak = -1;
	for (let i = from; i <= to; i++) {
		if (beat[i] < LEAST_PEAK || beat[i] < beat[i - 1] || beat[i] < beat[i + 1]) continue;
		if (peak < 0 || beat[i] > beat[peak]) peak = i;
	}
	if (peak < 0) return null;
	const [a, b, c] = [beat[peak - 1], beat[peak], beat[peak + 1]];
	const bend = a - 2 * b + c;
	const shift = bend < 0 ? Math.max(-0.5, Math.min(0.5, (0.5 * (a - c)) / bend)) : 0;
	return { time: (peak + shift) / rate, height: b };
}

/**
 * @param walk beats and bars as they were followed
 * @param isSounding whether there is anything to hear near a time: beats before the first sound and after the last go
 * @param onsetNear how much the sound rises near a time, in any unit
 */
export function placeBeats(
	activation: ActivationCurves,
	walk: BarWalk,
	isSounding: (time: number) => boolean,
	onsetNear: (time: number) => number,
): PlacedBeats {
	const peaks = Array.from(walk.beats, (time) => peakNear(activation, time));
	const heights = Float64Array.from(peaks, (peak) => peak?.height ?? 0);
	const onsets = walk.beats.map(onsetNear);
	const middle = (values: Float64Array): number => values.slice().sort()[values.length >> 1] ?? 0;
	const [typical, struck] = [middle(heights), middle(onsets)];
	// The walk goes on for a while where nothing contradicts it: into a last chord's echo, back before a first note.
	let from = 0;
	let to = walk.beats.length;
	while (from < to && !isSounding(walk.beats[from])) from++;
	while (to > from && !isSounding(walk.beats[to - 1])) to--;
	// A few beats without evidence are an echo; more of them are a faint intro or ending, and counted.
	const trim = (isFaint: (k: number) => boolean): void => {
		let first = from;
		while (first < to && isFaint(first)) first++;
		let last = to;
		while (last > first && isFaint(last - 1)) last--;
		if (first - from <= ECHO) from = first;
		if (to - last <= ECHO) to = last;
	};
	trim((k) => heights[k] <= EVIDENCE * typical);
	trim((k) => onsets[k] < STRUCK * struck);
	const beats = Float64Array.from({ length: to - from }, (_, k) =>
		Math.max(0, (peaks[from + k]?.time ?? walk.beats[from + k]) - LATE),
	);
	keepRising(beats);
	return {
		beats,
		confidence: judgeBeats(activation, beats, heights.slice(from, to)),
		bars: gatherBars(walk, from, to),
	};
}

/** Snapping moves neighbours by less than half a beat, so this only guards against activations that are broken. */
function keepRising(beats: Float64Array): void {
	for (let k = 1; k < beats.length; k++) if (beats[k] <= beats[k - 1]) beats[k] = beats[k - 1] + 1e-3;
}

/**
 * How sure each beat is, 0..1: how far the activation at the beats around stands above that between them, and how
 * evenly they follow each other.
 */
function judgeBeats(activation: ActivationCurves, beats: Float64Array, heights: Float64Array): Float32Array {
	const count = beats.length;
	const between = new Float64Array(count);
	for (let k = 0; k + 1 < count; k++) {
		// the strongest rival a quarter to three quarters of the way is an off-beat and no fault; the mean is
		const span = beats[k + 1] - beats[k];
		const first = Math.ceil((beats[k] + 0.2 * span) * activation.rate);
		const last = Math.min(activation.beat.length - 1, Math.floor((beats[k + 1] - 0.2 * span) * activation.rate));
		let sum = 0;
		for (let i = first; i <= last; i++) sum += activation.beat[i];
		between[k] = last >= first ? sum / (last - first + 1) : 0;
	}
	if (count > 1) between[count - 1] = between[count - 2];
	const evenness = new Float64Array(count).fill(1);
	for (let k = 1; k + 1 < count; k++) {
		const ratio = Math.log((beats[k + 1] - beats[k]) / (beats[k] - beats[k - 1]));
		evenness[k] = Math.exp(-0.5 * (ratio / 0.12) ** 2);
	}
	return Float32Array.from({ length: count }, (_, k) => {
		let weight = 0;
		let contrast = 0;
		let even = 0;
		for (let j = Math.max(0, k - AROUND); j <= Math.min(count - 1, k + AROUND); j++) {
			const w = 1 - Math.abs(j - k) / (AROUND + 1);
			weight += w;
			contrast += w * Math.max(0, heights[j] - between[j]);
			even += w * evenness[j];
		}
		return Math.max(0, Math.min(1, (contrast / weight) * (even / weight)));
	});
}

/** One entry for every bar that begins; a pickup before the first is left to the grid, which counts back from there. */
function gatherBars(walk: BarWalk, from: number, to: number): Bar[] {
	const bars: Bar[] = [];
	for (let k = from; k < to; k++) {
		if (walk.places[k] === 0) bars.push({ beat: k - from, beatsPerBar: walk.metres[k] });
	}
	return bars;
}
