/** Beats from taps: the taps say which level and phase, what was heard says where exactly, as far as both agree. */

export interface TapFit {
	/** Seconds, from the first tap to the last. */
	readonly beats: readonly number[];
	/** Of the taps. */
	readonly bpm: number;
	/** How the taps lie to what was heard: beats a tap, 1 as heard, 2 half as many, ½ twice; null: not on what was heard. */
	readonly level: number | null;
}

const FEWEST = 6;
/** Shares of the usual interval: a tap sooner than this is a slip; how far medians may differ to be the same tempo. */
const SLIP = 0.45;
const SAME_TEMPO = 0.12;
/** Of an interval: how far taps may scatter about the beats, and lie beside them as a whole, to be of them. */
const SCATTER = 0.16;
const BESIDE = 0.3;
/** Taps on either side that a tap is smoothed with. */
const AROUND = 4;

/**
 * @param taps seconds as heard, in any order; @param heard beats of the analysis, seconds, rising
 * @returns null with too few taps to go by
 */
export function fitTaps(taps: readonly number[], heard: ArrayLike<number>): TapFit | null {
	const { times, indices } = countTaps(taps);
	if (times.length < FEWEST) return null;
	const steps = indices[indices.length - 1];
	const interval = (times[times.length - 1] - times[0]) / steps;
	const bpm = 60 / interval;
	const from = times[0] - interval / 2;
	const to = times[times.length - 1] + interval / 2;
	let best: { beats: number[]; level: number; error: number } | null = null;
	for (const { beats, level } of levelsOf(
		Array.from(heard).filter((time) => time > from - 2 * interval && time < to + 2 * interval),
	)) {
		const fit = compare(times, beats, interval);
		if (fit !== null && (best === null || fit < best.error)) best = { beats, level, error: fit };
	}
	if (best !== null) {
		const within = best.beats.filter((time) => time > from && time < to);
		if (within.length >= 2) return { beats: within, bpm, level: best.level };
	}
	return { beats: smooth(times, indices), bpm, level: null };
}

/** Which beat each tap is: a missed tap leaves a gap, a slip of the finger is left out. */
function countTaps(taps: readonly number[]): { times: number[]; indices: number[] } {
	const sorted = [...taps].sort((a, b) => a - b);
	const gaps = sorted.slice(1).map((time, k) => time - sorted[k]);
	if (gaps.length === 0) return { times: sorted, indices: sorted.map(() => 0) };
	const usual = [...gaps].sort((a, b) => a - b)[gaps.length >> 1];
	const times = [sorted[0]];
	const indices = [0];
	for (const time of sorted.slice(1)) {
		const gap = time - times[times.length - 1];
		if (gap < SLIP * usual) continue;
		indices.push(indices[indices.length - 1] + Math.max(1, Math.round(gap / usual)));
		times.push(time);
	}
	return { times, indices };
}

/** What was heard: as it is, every second beat, and twice as many. */
function levelsOf(heard: number[]): { beats: number[]; level: number }[] {
	const doubled = heard.flatMap((time, k) => (k + 1 < heard.length ? [time, (time + heard[k + 1]) / 2] : [time]));
	return [
		{ beats: heard, level: 1 },
		{ beats: heard.filter((_, k) => k % 2 === 0), level: 2 },
		{ beats: heard.filter((_, k) => k % 2 === 1), level: 2 },
		{ beats: doubled, level: 0.5 },
		{ beats: doubled.filter((_, k) => k % 2 === 1), level: 1 },
	];
}

/** Scatter of the taps about these beats and how far they lie beside them, in intervals; null where they aren't of them. */
function compare(times: readonly number[], beats: readonly number[], interval: number): number | null {
	if (beats.length < 3) return null;
	const gaps = beats
		.slice(1)
		.map((time, k) => time - beats[k])
		.sort((a, b) => a - b);
	if (Math.abs(Math.log(gaps[gaps.length >> 1] / interval)) > SAME_TEMPO) return null;
	const off = times.map((time) => {
		let nearest = Infinity;
		for (const beat of beats) if (Math.abs(time - beat) < Math.abs(nearest)) nearest = time - beat;
		return nearest / interval;
	});
	const beside = [...off].sort((a, b) => a - b)[off.length >> 1];
	const away = off.map((value) => Math.abs(value - beside)).sort((a, b) => a - b);
	const scatter = away[away.length >> 1];
	if (scatter > SCATTER || Math.abs(beside) > BESIDE) return null;
	return scatter + Math.abs(beside);
}

/** A straight line through the taps around each beat (least squares), so that the hand's unsteadiness falls out. */
function smooth(times: readonly number[], indices: readonly number[]): number[] {
	const beats: number[] = [];
	for (let index = 0; index <= indices[indices.length - 1]; index++) {
		const near = indices
			.map((at, k) => ({ at, time: times[k] }))
			.sort((a, b) => Math.abs(a.at - index) - Math.abs(b.at - index))
			.slice(0, 2 * AROUND + 1);
		const middle = near.reduce((sum, { at }) => sum + at, 0) / near.length;
		const mean = near.reduce((sum, { time }) => sum + time, 0) / near.length;
		const across = near.reduce((sum, { at }) => sum + (at - middle) ** 2, 0);
		const slope = near.reduce((sum, { at, time }) => sum + (at - middle) * (time - mean), 0) / across;
		beats.push(mean + slope * (index - middle));
	}
	return beats;
}
