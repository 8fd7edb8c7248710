import type { Analysis } from "./analysis.ts";

/** Seconds before a place over which the sound is compared with what comes at it. */
const BEFORE = 0.02;
/** Share of the loudest peak around that a rise must reach to count as an onset. */
const LEAST_RISE = 0.2;

/**
 * Where the sound sets in nearest to a time: the steepest rise of the waveform's envelope, to its 5 ms.
 * @param seconds the time
 * @param within seconds on either side in which is looked
 * @returns seconds; null where nothing rises enough
 */
export function nearestOnset(peaks: Analysis["peaks"], seconds: number, within: number): number | null {
	const { values, rate } = peaks;
	const count = values.length / 2;
	const levelAt = (i: number): number =>
		i < 0 || i >= count ? 0 : Math.max(Math.abs(values[2 * i]), Math.abs(values[2 * i + 1]));
	const lag = Math.max(1, Math.round(BEFORE * rate));
	const first = Math.max(0, Math.ceil((seconds - within) * rate));
	const last = Math.min(count - 1, Math.floor((seconds + within) * rate));
	let loudest = 0;
	for (let i = first - 2 * lag; i <= last + 2 * lag; i++) loudest = Math.max(loudest, levelAt(i));
	let steepest = 0;
	let at = -1;
	for (let i = first; i <= last; i++) {
		let before = 0;
		for (let j = i - lag; j < i; j++) before = Math.max(before, levelAt(j));
		// What comes at once and in the next column: an attack may begin at the end of one.
		const rise = Math.max(levelAt(i), levelAt(i + 1)) - before;
		const here = levelAt(i) - before;
		if (here < LEAST_RISE * loudest || rise <= steepest) continue;
		steepest = rise;
		at = i;
	}
	return at < 0 ? null : at / rate;
}
