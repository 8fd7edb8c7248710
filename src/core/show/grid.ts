import type { Beats, Seconds } from "../units/index.ts";
import type { Grid } from "./show.ts";

/**
 * The beat grid as a map between seconds and positions. Between two beats time runs evenly (a tempo change is a change
 * of interval); before the first beat and past the last the grid goes on at its end intervals.
 */
export interface BeatMap {
	secondsAt(position: Beats): Seconds;
	positionAt(seconds: Seconds): Beats;
	/** Bar and beat as people count them, both from 1; the beat may have a fraction. Before bar 1: 0, −1, … */
	barAt(position: Beats): BarBeat;
	/** Position of a bar's beat; `beat` counts from 1 and may have a fraction or lie outside the bar. */
	positionOf(bar: number, beat?: number): Beats;
	/** Beats in the bar that `position` lies in: its metre. */
	beatsPerBarAt(position: Beats): number;
}

export interface BarBeat {
	readonly bar: number;
	readonly beat: number;
}

/** Without a single beat the grid counts 120 beats a minute from 0 s, four to the bar, so that cues have a place. */
export const DEFAULT_BEAT_INTERVAL = 0.5;
export const DEFAULT_BEATS_PER_BAR = 4;

/** Last index i with values(i) ≤ x, or −1. */
function lastAtMost(count: number, timeOf: (index: number) => number, x: number): number {
	let low = -1;
	let high = count;
	while (high - low > 1) {
		const middle = (low + high) >> 1;
		if (timeOf(middle) <= x) low = middle;
		else high = middle;
	}
	return low;
}

/**
 * @param grid beats in seconds, strictly rising; bars rising. No beats: 120 a minute from 0 s; one beat: that interval
 * from there. No bars: four beats each from the first beat.
 */
export function createBeatMap(grid: Pick<Grid, "beats" | "bars">): BeatMap {
	const { beats, bars } = grid;
	const last = beats.length - 1;
	const first = last >= 0 ? beats[0] : 0;
	const firstInterval = last > 0 ? beats[1] - beats[0] : DEFAULT_BEAT_INTERVAL;
	const lastInterval = last > 0 ? beats[last] - beats[last - 1] : DEFAULT_BEAT_INTERVAL;

	const secondsAt = (position: Beats): Seconds => {
		if (position <= 0 || last < 1) return first + position * firstInterval;
		if (position >= last) return beats[last] + (position - last) * lastInterval;
		const index = Math.floor(position);
		return beats[index] + (position - index) * (beats[index + 1] - beats[index]);
	};
	const positionAt = (seconds: Seconds): Beats => {
		if (seconds <= first || last < 1) return (seconds - first) / firstInterval;
		if (seconds >= beats[last]) return last + (seconds - beats[last]) / lastInterval;
		const index = lastAtMost(beats.length, (i) => beats[i], seconds);
		return index + (seconds - beats[index]) / (beats[index + 1] - beats[index]);
	};

	const barCount = bars.length;
	const startOf = (index: number): number => bars[index].beat;
	const firstBarBeat = barCount > 0 ? bars[0].beat : 0;
	const firstMetre = barCount > 0 ? bars[0].beatsPerBar : DEFAULT_BEATS_PER_BAR;
	const lastBarBeat = barCount > 0 ? bars[barCount - 1].beat : 0;
	const lastMetre = barCount > 0 ? bars[barCount - 1].beatsPerBar : DEFAULT_BEATS_PER_BAR;

	/** Bars that go on beyond the list: `bar` is the number of the one that starts at `start`. */
	const goOn = (position: number, start: number, bar: number, metre: number): BarBeat => {
		const further = Math.floor((position - start) / metre);
		return { bar: bar + further, beat: position - start - further * metre + 1 };
	};
	const barAt = (position: Beats): BarBeat => {
		if (position < firstBarBeat || barCount === 0) return goOn(position, firstBarBeat, 1, firstMetre);
		if (position >= lastBarBeat) return goOn(position, lastBarBeat, barCount, lastMetre);
		const index = lastAtMost(barCount, startOf, position);
		return { bar: index + 1, beat: position - bars[index].beat + 1 };
	};
	const positionOf = (bar: number, beat = 1): Beats => {
		if (bar < 1 || barCount === 0) return firstBarBeat + (bar - 1) * firstMetre + beat - 1;
		if (bar > barCount) return lastBarBeat + (bar - barCount) * lastMetre + beat - 1;
		return bars[bar - 1].beat + beat - 1;
	};
	const beatsPerBarAt = (position: Beats): number => {
		if (position < firstBarBeat || barCount === 0) return firstMetre;
		if (position >= lastBarBeat) return lastMetre;
		return bars[lastAtMost(barCount, startOf, position)].beatsPerBar;
	};
	return { secondsAt, positionAt, barAt, positionOf, beatsPerBarAt };
}
