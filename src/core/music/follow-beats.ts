/**
 * Beats and bars of a soundtrack from its activation: the beats' walk at several levels (as found, twice and half as
 * fast, on the off-beat, in threes), bars laid over each, and the reading whose beats and bars explain the sound best.
 */
import type { ActivationCurves } from "./analysis.ts";
import { type Harmony, harmonicChange } from "./harmony.ts";
import { type BarDivision, layBars } from "./lay-bars.ts";
import { priorOf, scoreBeats, walkBeats } from "./walk-beats.ts";

/** Log-odds are held within this. */
const ODDS_LIMIT = 5;
/** Log-odds from which a beat at a level is worth having: training weighed beats three times (ln 3), and a little. */
const BEAT_WORTH = 1.3;
/** Log-odds from which a beat may be a bar's first: training weighed downbeats six times. */
const DOWNBEAT_WORTH = 0.8;
/** Weight of the downbeat's log-odds, and of a harmonic change (per unit of its z-score), in a bar's gain. */
const DOWNBEAT_WEIGHT = 0.5;
const HARMONY_WEIGHT = 0.4;
/** Weight of what the bars gain beside what the beats gain, when levels are compared. */
const BARS_IN_LEVEL = 0.25;
/** What a reading at another level than the walk's own must gain for each of its beats to be taken. */
const LEVEL_COST = 0.05;
/** Beats a minute within which people count. */
const SLOWEST = 48;
const FASTEST = 230;

/** Beats in seconds with their places in bars. */
export interface BarWalk {
	readonly beats: Float64Array;
	readonly places: Uint8Array;
	readonly metres: Uint8Array;
}

/** Highest value of a curve within two frames of a time. */
function highestNear(curve: Float32Array, rate: number, time: number): number {
	const centre = Math.round(time * rate);
	let most = 0;
	for (let i = Math.max(0, centre - 2); i <= Math.min(curve.length - 1, centre + 2); i++)
		most = Math.max(most, curve[i]);
	return most;
}

const logOdds = (p: number): number =>
	Math.max(-ODDS_LIMIT, Math.min(ODDS_LIMIT, Math.log(Math.max(p, 1e-6) / Math.max(1 - p, 1e-6))));

/** For each beat the evidence that it begins a bar. Where no beat is heard the downbeat curve says nothing either. */
function weighDownbeats(activation: ActivationCurves, harmony: Harmony, beats: Float64Array): Float64Array {
	const change = harmonicChange(harmony, beats);
	return Float64Array.from(beats, (time, k) => {
		const p = highestNear(activation.downbeat, activation.rate, time);
		const heard = highestNear(activation.beat, activation.rate, time);
		const odds = logOdds(p) - DOWNBEAT_WORTH;
		return DOWNBEAT_WEIGHT * heard * odds + HARMONY_WEIGHT * change[k];
	});
}

interface Reading {
	readonly beats: Float64Array;
	readonly bars: BarDivision;
	readonly score: number;
}

/** What beats gain at given times, by the same measure for every level. */
function gainOfBeats(activation: ActivationCurves, beats: Float64Array): number {
	let sum = 0;
	for (let k = 0; k < beats.length; k++) {
		sum += logOdds(highestNear(activation.beat, activation.rate, beats[k])) - BEAT_WORTH;
		if (k > 0) sum += priorOf(beats[k] - beats[k - 1]);
	}
	return sum;
}

const everySecond = (beats: Float64Array, first: number): Float64Array => beats.filter((_, k) => k % 2 === first);

/** @returns no beats where the activation holds none */
export function followBeats(
	activation: ActivationCurves,
	harmony: Harmony,
	onProgress?: (share: number) => void,
): BarWalk {
	const score = scoreBeats(activation);
	const own = walkBeats(score, null, (share) => onProgress?.(share * 0.6));
	if (own.beats.length < 3) {
		return {
			beats: own.beats,
			places: new Uint8Array(own.beats.length),
			metres: new Uint8Array(own.beats.length).fill(4),
		};
	}
	const read = (beats: Float64Array, cost: number): Reading => {
		const bars = layBars(weighDownbeats(activation, harmony, beats));
		return { beats, bars, score: gainOfBeats(activation, beats) + BARS_IN_LEVEL * bars.gain - cost * beats.length };
	};
	const readings: Reading[] = [read(own.beats, 0)];
	const tempo = (60 * (own.beats.length - 1)) / (own.beats[own.beats.length - 1] - own.beats[0]);
	const consider = (factor: number, beats: () => Float64Array): void => {
		if (tempo / factor < SLOWEST || tempo / factor > FASTEST) return;
		const times = beats();
		if (times.length >= 3) readings.push(read(times, LEVEL_COST));
	};
	const walkAt = (factor: number) => walkBeats(score, { beats: own.beats, factor }).beats;
	consider(2, () => everySecond(own.beats, 0));
	consider(2, () => everySecond(own.beats, 1));
	if (tempo * 2 <= FASTEST) {
		const twice = walkAt(1 / 2);
		consider(1 / 2, () => twice);
		consider(1, () => everySecond(twice, 0));
		consider(1, () => everySecond(twice, 1));
	}
	onProgress?.(0.8);
	for (const factor of [2 / 3, 3 / 2]) consider(factor, () => walkAt(factor));
	onProgress?.(1);
	let best = readings[0];
	for (const reading of readings) if (reading.score > best.score) best = reading;
	return { beats: best.beats, places: best.bars.places, metres: best.bars.metres };
}
