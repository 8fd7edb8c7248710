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
const BEAT_WORTH = 1.5;
/** Weight of what bars gain beside what beats gain. */
const BARS_IN_LEVEL = 0.4;
/** What changing over from one reading to another costs: about as much as ten good beats bring. */
const CHANGE = 25;
/** Seconds between places where a change may come. */
const STEP = 0.5;
/** Beats a minute within which people count, and what a beat outside costs. */
const SLOWEST = 46;
const FASTEST = 235;
const OUTSIDE = 4;
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

/** What a reading gains in each step of time. */
function gainsOf(activation: ActivationCurves, reading: Reading, steps: number): Float64Array {
	const gains = new Float64Array(steps);
	const { beats, barGains } = reading;
	for (let k = 0; k < beats.length; k++) {
		const interval = k > 0 ? beats[k] - beats[k - 1] : beats[1] - beats[0];
		let gain = logOdds(highestNear(activation.beat, activation.rate, beats[k])) - BEAT_WORTH;
		gain += priorOf(interval) + BARS_IN_LEVEL * barGains[k];
		if (interval > 60 / SLOWEST || interval < 60 / FASTEST) gain -= OUTSIDE;
		gains[Math.min(steps - 1, Math.floor(beats[k] / STEP))] += gain;
	}
	return gains;
}

/** Which reading holds in each step: the most likely way through them. */
function chooseReadings(gains: readonly Float64Array[], steps: number): Uint8Array {
	const count = gains.length;
	const came = new Uint8Array(steps * count);
	let best = new Float64Array(count);
	let next = new Float64Array(count);
	for (let s = 0; s < steps; s++) {
		let top = 0;
		for (let r = 1; r < count; r++) if (best[r] > best[top]) top = r;
		for (let r = 0; r < count; r++) {
			const changed = best[top] - CHANGE > best[r];
			came[s * count + r] = changed ? top : r;
			next[r] = (changed ? best[top] - CHANGE : best[r]) + gains[r][s];
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
	const chosen = chooseReadings(
		readings.map((reading) => gainsOf(activation, reading, steps)),
		steps,
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
