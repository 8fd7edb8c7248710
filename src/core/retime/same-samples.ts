/** Whether the samples themselves are the same along a line, and from where to where: then nothing is left to guess. */
import type { Samples } from "../decode/index.ts";
import type { Line } from "./line.ts";
import { oldOn } from "./line.ts";
import { audible } from "./small-copy.ts";

/** Samples may differ by the rounding of a 16-bit file and its dither. */
const SAME = 2.5 / 32768;
const PROBE = 2048;
const PROBES = 16;
/** Samples to either side of the measured offset that are tried. */
const NEAR = 3;
/** So many unlike samples in a row end a stretch: one alone may be a click that was taken out. */
const ENOUGH = 12;

/** Full-rate mono of a soundtrack, read where it is needed. */
export interface MonoReader {
	readonly length: number;
	/** Sample i of the mean of all channels; 0 outside. */
	at(i: number): number;
}

export function createMonoReader(samples: Samples): MonoReader {
	const channels = audible(samples.channels);
	const length = samples.channels[0]?.length ?? 0;
	const first = channels[0];
	if (channels.length === 1) return { length, at: (i) => (i >= 0 && i < length ? first[i] : 0) };
	const at = (i: number): number => {
		if (i < 0 || i >= length) return 0;
		let sum = 0;
		for (const channel of channels) sum += channel[i];
		return sum / channels.length;
	};
	return { length, at };
}

/**
 * The whole number of samples by which old runs ahead of new along a line of rate 1 where the samples are the same, or
 * null where they aren't. Two probes of many suffice: thousands of samples aren't the same by chance, and the line may
 * hold only here and there.
 * @param from new samples, likewise `to`
 */
export function sameOffset(
	old: MonoReader,
	current: MonoReader,
	line: Line,
	sampleRate: number,
	from: number,
	to: number,
): number | null {
	if (line.rate !== 1) return null;
	const near = Math.round(oldOn(line, 0) * sampleRate);
	let best: number | null = null;
	let most = 0;
	for (let d = -NEAR; d <= NEAR; d++) {
		const { same } = probe(old, current, near + d, from, to);
		if (same > most) {
			most = same;
			best = near + d;
		}
	}
	return most >= 2 ? best : null;
}

/** Share of the places between two new samples at which something is heard and the samples are the same. */
export function sameShare(old: MonoReader, current: MonoReader, offset: number, from: number, to: number): number {
	const { same, heard } = probe(old, current, offset, from, to);
	return heard === 0 ? 0 : same / heard;
}

function probe(
	old: MonoReader,
	current: MonoReader,
	offset: number,
	from: number,
	to: number,
): { same: number; heard: number } {
	let same = 0;
	let heard = 0;
	for (let p = 0; p < PROBES; p++) {
		const start = Math.round(from + (Math.max(0, to - from - PROBE) * (p + 0.5)) / PROBES);
		let energy = 0;
		let unlike = 0;
		for (let i = start; i < start + PROBE; i++) {
			const value = current.at(i);
			energy += value * value;
			if (Math.abs(value - old.at(i + offset)) > SAME) unlike++;
		}
		if (energy < PROBE * SAME * SAME * 100) continue;
		heard++;
		if (unlike < PROBE / 50) same++;
	}
	return { same, heard };
}

/**
 * How far the samples stay the same, from a new sample inside the stretch on.
 * @param step 1 forwards, −1 backwards
 * @param most samples to look at
 * @returns the last new sample (backwards: the first) that is the same; `start − step` where not even the start is
 */
export function sameUntil(
	old: MonoReader,
	current: MonoReader,
	offset: number,
	start: number,
	step: 1 | -1,
	most: number,
): number {
	let last = start - step;
	let unlike = 0;
	for (let n = 0, i = start; n < most; n++, i += step) {
		if (i < 0 || i >= current.length || i + offset < 0 || i + offset >= old.length) break;
		if (Math.abs(current.at(i) - old.at(i + offset)) <= SAME) {
			last = i;
			unlike = 0;
		} else if (++unlike >= ENOUGH) break;
	}
	return last;
}

/**
 * Whether short frames are the same along an offset.
 * @param centres new samples, one a frame
 * @param reach samples to either side that a frame spans
 * @returns 1 for each frame whose samples are the same and not all silent
 */
export function sameFrames(
	old: MonoReader,
	current: MonoReader,
	offset: number,
	centres: Int32Array,
	reach: number,
): Uint8Array {
	const same = new Uint8Array(centres.length);
	// Every few samples will do: where the music differs, nearly every sample does.
	const step = Math.max(1, Math.floor(reach / 8));
	centres.forEach((centre, f) => {
		let heard = false;
		for (let i = centre - reach; i <= centre + reach; i += step) {
			const value = current.at(i);
			if (Math.abs(value - old.at(i + offset)) > SAME) return;
			heard ||= Math.abs(value) > 4 * SAME;
		}
		if (heard) same[f] = 1;
	});
	return same;
}

/** True where two soundtracks are the same to the last sample. */
export function sameSoundtrack(old: Samples, current: Samples): boolean {
	if (old.sampleRate !== current.sampleRate || old.channels.length !== current.channels.length) return false;
	return old.channels.every((channel, c) => {
		const other = current.channels[c];
		if (channel.length !== other.length) return false;
		for (let i = 0; i < channel.length; i++) if (channel[i] !== other[i]) return false;
		return true;
	});
}
