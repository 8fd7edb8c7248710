/**
 * The level at which people tap, decided by the evidence and not for the track as a whole: several readings of the
 * beats (as walked, twice and half as fast, on the off-beat, in threes) run side by side, and the most likely way
 * through them changes over where another one explains the sound better for long enough.
 */
import type { ActivationCurves } from "./analysis.ts";
import { priorOf } from "./walk-beats.ts";

/** Log-odds are held within this. */
const ODDS_LIMIT = 5;
/** Log-odds from which a beat at a level is worth having: training weighed beats three times (ln 3), and a little. */
const BEAT_WORTH = 1.8;
/** Where the music is faint, a beat is worth having from this much below the clearer beats around. */
const BELOW_CLEAR = 0.3;
/** Beats on either side that count as around. */
const AROUND = 12;
/** Weight of what bars gain beside what beats gain. */
const BARS_IN_LEVEL = 0.4;
/** What changing over from one reading to another costs; and where the walk itself has changed its tempo. */
const CHANGE = 60;
const CHANGE_AT_TEMPO = 12;
/** Logarithm of a change of tempo that counts as one. */
const TEMPO_CHANGE = 0.1;
/** Seconds between places where a change may come. */
const STEP = 0.5;
/** Beats a minute within which people count, and what a beat outside costs. */
const SLOWEST = 46;
const FASTEST = 235;
const OUTSIDE = 10;
/** What a step costs in which a reading has no beats yet, or none any more, though people count on. */
const ABSENT = 6;
/** Seconds within which two readings' beats are the same beat. */
const SAME = 0.03;

/** One reading of the beats. */
export interface Reading {
	/** Seconds. */
	readonly beats: Float64Array;
	/** For each beat what it brings to its bar (lay-bars.ts). */
	readonly barGains: Float64Array;
}

/** Log-odds of a likelihood, held within the limit. */
export const logOdds = (p: number): number =>
	Math.max(-ODDS_LIMIT, Math.min(ODDS_LIMIT, Math.log(Math.max(p, 1e-6) / Math.max(1 - p, 1e-6))));

/** Highest value of a curve within two frames of a time. */
export function highestNear(curve: Float32Array, rate: number, time: number): number {
	const centre = Math.round(time * rate);
	let most = 0;
	for (let i = Math.max(0, centre - 2); i <= Math.min(curve.length - 1, centre + 2); i++) {
		most = Math.max(most, curve[i]);
	}
	return most;
}

/**
 * What a reading gains in each step of time.
 * @param own the beats as walked: where they go on, a reading that has ended, or has not begun, is none
 */
function gainsOf(activation: ActivationCurves, reading: Reading, worth: Float64Array, own: Float64Array): Float64Array {
	const steps = worth.length;
	const gains = new Float64Array(steps);
	const { beats, barGains } = reading;
	const stepOf = (time: number): number => Math.min(steps - 1, Math.max(0, Math.floor(time / STEP)));
	const last = beats.length - 1;
	const first = beats[0] - (beats[1] - beats[0]);
	const end = beats[last] + (beats[last] - beats[last - 1]);
	for (let s = stepOf(own[0]); s < stepOf(first); s++) gains[s] -= ABSENT;
	for (let s = stepOf(end) + 1; s <= stepOf(own[own.length - 1]); s++) gains[s] -= ABSENT;
	for (let k = 0; k < beats.length; k++) {
		const interval = k > 0 ? beats[k] - beats[k - 1] : beats[1] - beats[0];
		const step = stepOf(beats[k]);
		let gain = logOdds(highestNear(activation.beat, activation.rate, beats[k])) - worth[step];
		gain += priorOf(interval) + BARS_IN_LEVEL * barGains[k];
		if (interval > 60 / SLOWEST || interval < 60 / FASTEST) gain -= OUTSIDE;
		gains[step] += gain;
	}
	return gains;
}

/** For each step what a beat must reach, from the walk's beats around: the clearer of its two alternations. */
function weighWorth(activation: ActivationCurves, beats: Float64Array, steps: number): Float64Array {
	const odds = beats.map((time) => logOdds(highestNear(activation.beat, activation.rate, time)));
	const worth = new Float64Array(steps);
	for (let s = 0, k = 0; s < steps; s++) {
		while (k + 1 < beats.length && beats[k] < s * STEP) k++;
		const sums = [0, 0];
		const counts = [0, 0];
		for (let j = Math.max(0, k - AROUND); j <= Math.min(beats.length - 1, k + AROUND); j++) {
			sums[j % 2] += odds[j];
			counts[j % 2]++;
		}
		const clear = Math.max(sums[0] / Math.max(1, counts[0]), sums[1] / Math.max(1, counts[1]));
		worth[s] = Math.min(BEAT_WORTH, clear - BELOW_CLEAR);
	}
	return worth;
}

/** For each step what a change of reading costs there. */
function weighChanges(beats: Float64Array, steps: number): Float64Array {
	const costs = new Float64Array(steps).fill(CHANGE);
	const span = 4;
	for (let k = span; k + span < beats.length; k++) {
		const change = Math.log((beats[k + span] - beats[k]) / (beats[k] - beats[k - span]));
		if (Math.abs(change) < TEMPO_CHANGE) continue;
		const at = Math.floor(beats[k] / STEP);
		for (let s = Math.max(0, at - 3); s <= Math.min(steps - 1, at + 3); s++) costs[s] = CHANGE_AT_TEMPO;
	}
	return costs;
}

/** Which reading holds in each step: the most likely way through them. */
function chooseReadings(gains: readonly Float64Array[], costs: Float64Array): Uint8Array {
	const steps = costs.length;
	const count = gains.length;
	const came = new Uint8Array(steps * count);
	let best = new Float64Array(count);
	let next = new Float64Array(count);
	for (let s = 0; s < steps; s++) {
		let top = 0;
		for (let r = 1; r < count; r++) if (best[r] > best[top]) top = r;
		for (let r = 0; r < count; r++) {
			const changed = best[top] - costs[s] > best[r];
			came[s * count + r] = changed ? top : r;
			next[r] = (changed ? best[top] - costs[s] : best[r]) + gains[r][s];
		}
		[best, next] = [next, best];
	}
	let r = 0;
	for (let other = 1; other < count; other++) if (best[other] > best[r]) r = other;
	const chosen = new Uint8Array(steps);
	for (let s = steps - 1; s >= 0; s--) {
		chosen[s] = r;
		r = came[s * count + r];
	}
	return chosen;
}

/** The time near `wanted` where both readings have the same beat, or `wanted` where there is none within two beats. */
function commonBeat(a: Float64Array, b: Float64Array, wanted: number): number {
	let best = wanted;
	let away = 2.5;
	for (let i = 0, j = 0; i < a.length && j < b.length; ) {
		if (Math.abs(a[i] - b[j]) <= SAME && Math.abs(a[i] - wanted) < away) {
			best = a[i];
			away = Math.abs(a[i] - wanted);
		}
		if (a[i] < b[j]) i++;
		else j++;
	}
	return best;
}

/**
 * The beats of the most likely way through the readings.
 * @param readings the first is what the walk itself found
 */
export function chooseBeats(activation: ActivationCurves, readings: readonly Reading[]): Float64Array {
	const steps = Math.max(1, Math.ceil(activation.beat.length / activation.rate / STEP));
	const worth = weighWorth(activation, readings[0].beats, steps);
	const chosen = chooseReadings(
		readings.map((reading) => gainsOf(activation, reading, worth, readings[0].beats)),
		weighChanges(readings[0].beats, steps),
	);
	const beats: number[] = [];
	let from = Number.NEGATIVE_INFINITY;
	for (let s = 0; s < steps; ) {
		let end = s;
		while (end < steps && chosen[end] === chosen[s]) end++;
		const own = readings[chosen[s]].beats;
		const to = end < steps ? commonBeat(own, readings[chosen[end]].beats, end * STEP) : Number.POSITIVE_INFINITY;
		for (const time of own) {
			if (time <= from + SAME || time > to + SAME) continue;
			// A reading that takes over without a common beat must not begin within the last one's beat.
			const last = beats.length > 1 ? beats[beats.length - 1] - beats[beats.length - 2] : 0;
			if (beats.length > 0 && time - beats[beats.length - 1] < 0.4 * last) continue;
			beats.push(time);
		}
		from = to;
		s = end;
	}
	return Float64Array.from(beats);
}
