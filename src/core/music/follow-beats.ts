/** Beats and bars of a soundtrack from its activation: walked, read at the level that people tap, divided into bars. */
import type { ActivationCurves } from "./analysis.ts";
import { type Harmony, harmonicChange } from "./harmony.ts";
import { layBars } from "./lay-bars.ts";
import { chooseBeats, highestNear, logOdds, type Reading } from "./read-levels.ts";
import { scoreBeats, walkBeats } from "./walk-beats.ts";

/** Log-odds from which a beat may be a bar's first: training weighed downbeats six times. */
const DOWNBEAT_WORTH = 0.8;
/** Weight of the downbeat's log-odds, and of a harmonic change (per unit of its z-score), in a bar's gain. */
const DOWNBEAT_WEIGHT = 0.5;
const HARMONY_WEIGHT = 0.4;
/** Beats a minute of the walk up to which walking twice as fast is tried. */
const DOUBLE_UP_TO = 125;

/** Beats in seconds with their places in bars. */
export interface BarWalk {
	readonly beats: Float64Array;
	readonly places: Uint8Array;
	readonly metres: Uint8Array;
}

/** For each beat the evidence that it begins a bar. Where no beat is heard the downbeat curve says nothing either. */
function weighDownbeats(activation: ActivationCurves, harmony: Harmony, beats: Float64Array): Float64Array {
	const change = harmonicChange(harmony, beats);
	return Float64Array.from(beats, (time, k) => {
		const heard = highestNear(activation.beat, activation.rate, time);
		const odds = logOdds(highestNear(activation.downbeat, activation.rate, time)) - DOWNBEAT_WORTH;
		return DOWNBEAT_WEIGHT * heard * odds + HARMONY_WEIGHT * change[k];
	});
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
	const divide = (beats: Float64Array) => layBars(weighDownbeats(activation, harmony, beats));
	if (own.length < 3) {
		const { places, metres } = divide(own);
		return { beats: own, places, metres };
	}
	const readings: Reading[] = [];
	const consider = (beats: Float64Array): void => {
		if (beats.length >= 3) readings.push({ beats, barGains: divide(beats).gains });
	};
	const walkAt = (factor: number) => walkBeats(score, { beats: own, factor });
	consider(own);
	for (const first of [0, 1]) consider(everySecond(own, first));
	let slow = 0;
	for (let k = 1; k < own.length; k++) if (own[k] - own[k - 1] > 60 / DOUBLE_UP_TO) slow++;
	if (slow > 8) {
		const twice = walkAt(1 / 2);
		consider(twice);
		for (const first of [0, 1]) consider(everySecond(twice, first));
	}
	onProgress?.(0.8);
	for (const factor of [2 / 3, 3 / 2]) consider(walkAt(factor));
	onProgress?.(1);
	const beats = chooseBeats(activation, readings);
	const { places, metres } = divide(beats);
	return { beats, places, metres };
}
