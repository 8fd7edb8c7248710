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
/** Added to a downbeat's log-odds: one beat in about four is one. */
const DOWNBEAT_ODDS = 1.1;
/** Weight of the downbeat's log-odds, and of a harmonic change (per unit of its z-score), in a bar's gain. */
const DOWNBEAT_WEIGHT = 0.5;
const HARMONY_WEIGHT = 0.4;
/** Weight of what the bars gain beside what the beats gain, when levels are compared. */
const BARS_IN_LEVEL = 1;
/** What a reading at another level than the walk's own must gain for each of its beats to be taken. */
const LEVEL_COST = 0.1;

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

const clamped = (x: number): number => Math.max(-ODDS_LIMIT, Math.min(ODDS_LIMIT, x));

/** For each beat the evidence that it begins a bar. Where no beat is heard the downbeat curve says nothing either. */
function weighDownbeats(activation: ActivationCurves, harmony: Harmony, beats: Float64Array): Float64Array {
	const change = harmonicChange(harmony, beats);
	return Float64Array.from(beats, (time, k) => {
		const p = highestNear(activation.downbeat, activation.rate, time);
		const heard = highestNear(activation.beat, activation.rate, time);
		const odds = clamped(Math.log(Math.max(p, 1e-4) / Math.max(1 - p, 1e-4)) + DOWNBEAT_ODDS);
		return DOWNBEAT_WEIGHT * heard * odds + HARMONY_WEIGHT * change[k];
	});
}

interface Reading {
	readonly beats: Float64Array;
	readonly bars: BarDivision;
	readonly score: number;
}

/** What beats gain at given times, by the same measure for every level. */
function gainOfBeats(score: Float64Array, beats: Float64Array): number {
	let sum = 0;
	for (let k = 0; k < beats.length; k++) {
		const t = Math.round(beats[k] * 100);
		sum += score[Math.max(0, Math.min(score.length - 1, t))];
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
		return { beats, bars, score: gainOfBeats(score, beats) + BARS_IN_LEVEL * bars.gain - cost * beats.length };
	};
	const readings: Reading[] = [read(own.beats, 0)];
	const consider = (beats: Float64Array): void => {
		if (beats.length >= 3) readings.push(read(beats, LEVEL_COST));
	};
	const twice = walkBeats(score, { beats: own.beats, factor: 1 / 2 });
	onProgress?.(0.75);
	consider(twice.beats);
	for (const first of [0, 1]) {
		consider(everySecond(own.beats, first));
		consider(everySecond(twice.beats, first));
	}
	for (const factor of [2 / 3, 3 / 2]) consider(walkBeats(score, { beats: own.beats, factor }).beats);
	onProgress?.(1);
	let best = readings[0];
	for (const reading of readings) if (reading.score > best.score) best = reading;
	return { beats: best.beats, places: best.bars.places, metres: best.bars.metres };
}
