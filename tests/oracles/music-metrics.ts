/**
 * How well beats, bars and section boundaries agree with the truth. Written from the papers and held against worked
 * cases in music-metrics.test.ts; imports nothing of src.
 *
 * F-measure: Dixon (2001) with ±70 ms, Davies, Degara and Plumbley, "Evaluation Methods for Musical Audio Beat Tracking
 * Algorithms" (2009). CMLt, AMLt: Hainsworth (2004) and the same report. Boundaries: Turnbull et al. (2007).
 */

/** Seconds. Beats earlier than this are left out on both sides: trackers may settle. */
export const SETTLING = 5;
const BEAT_WINDOW = 0.07;
/** Share of the interval that a beat may be off in phase, and its interval in length. */
const CONTINUITY = 0.175;

/** Pairs [estimate, truth] in order, each used once, as many as possible within the window. Both must rise. */
function matchEvents(
	estimate: readonly number[],
	truth: readonly number[],
	window: number,
): (readonly [number, number])[] {
	const pairs: (readonly [number, number])[] = [];
	// On a line, taking the earliest truth that is still in reach leaves the most for those that follow.
	let next = 0;
	for (const time of estimate) {
		while (next < truth.length && truth[next] < time - window) next++;
		if (next < truth.length && truth[next] <= time + window) pairs.push([time, truth[next++]]);
	}
	return pairs;
}

/** Harmonic mean of precision and recall; 1 where both are empty. */
export function eventF(estimate: readonly number[], truth: readonly number[], window: number): number {
	if (estimate.length === 0 && truth.length === 0) return 1;
	return (2 * matchEvents(estimate, truth, window).length) / (estimate.length + truth.length);
}

const settled = (times: readonly number[]): number[] => times.filter((time) => time >= SETTLING);

/** F of beats (or of downbeats) at ±70 ms, the first 5 s left out. */
export function beatF(estimate: readonly number[], truth: readonly number[]): number {
	return eventF(settled(estimate), settled(truth), BEAT_WINDOW);
}

const everySecond = (times: readonly number[], first: number): number[] => times.filter((_, i) => i % 2 === first);

function doubled(times: readonly number[]): number[] {
	return times.flatMap((time, i) => (i + 1 < times.length ? [time, (time + times[i + 1]) / 2] : [time]));
}

/** The best F of the estimate as it is, halved (either phase) and doubled. */
export function bestLevelF(estimate: readonly number[], truth: readonly number[]): number {
	const levels = [estimate, everySecond(estimate, 0), everySecond(estimate, 1), doubled(estimate)];
	return Math.max(...levels.map((level) => beatF(level, truth)));
}

/** Median of estimate minus truth over matched beats, in seconds; NaN where nothing matches. */
export function signedError(estimate: readonly number[], truth: readonly number[]): number {
	const errors = matchEvents(settled(estimate), settled(truth), BEAT_WINDOW).map(([a, b]) => a - b);
	errors.sort((a, b) => a - b);
	return errors.length === 0 ? Number.NaN : errors[Math.floor(errors.length / 2)];
}

/** Share of beats that are right together with the one before, in phase and in interval. */
function continuity(estimate: readonly number[], truth: readonly number[]): number {
	if (estimate.length < 2 || truth.length < 2) return 0;
	const used = new Set<number>();
	let right = 0;
	estimate.forEach((time, m) => {
		let nearest = 0;
		for (let i = 1; i < truth.length; i++) {
			if (Math.abs(truth[i] - time) < Math.abs(truth[nearest] - time)) nearest = i;
		}
		if (used.has(nearest)) return;
		const forward = m === 0 || nearest === 0;
		if (forward && (m + 1 >= estimate.length || nearest + 1 >= truth.length)) return;
		const step = forward ? 1 : -1;
		const truthInterval = Math.abs(truth[nearest + step] - truth[nearest]);
		const interval = Math.abs(estimate[m + step] - time);
		const phase = Math.abs(truth[nearest] - time) / truthInterval;
		if (phase < CONTINUITY && Math.abs(1 - interval / truthInterval) < CONTINUITY) {
			used.add(nearest);
			right++;
		}
	});
	return right / Math.max(estimate.length, truth.length);
}

/** CMLt: continuity at the truth's own level. */
export function correctLevel(estimate: readonly number[], truth: readonly number[]): number {
	return continuity(settled(estimate), settled(truth));
}

/** AMLt: the best continuity against the truth, its off-beats, doubled, and halved on either phase. */
export function allowedLevels(estimate: readonly number[], truth: readonly number[]): number {
	const reference = settled(truth);
	const twice = doubled(reference);
	const levels = [reference, everySecond(twice, 1), twice, everySecond(reference, 0), everySecond(reference, 1)];
	return Math.max(...levels.map((level) => continuity(settled(estimate), level)));
}

/** F of section boundaries within ±window seconds; hand in inner boundaries only, without start and end. */
export function boundaryF(estimate: readonly number[], truth: readonly number[], window: number): number {
	return eventF(estimate, truth, window);
}
