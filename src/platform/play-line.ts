import type { Seconds } from "../core/units/index.ts";
import type { ClickTrack, PlayRate } from "./player.ts";

/**
 * One stretch of playing on the audio clock: from the instant `when` the music runs on from `position` at `rate`, and
 * jumps from the loop's end to its start. Nothing else is needed to say what is heard at any instant.
 */
export interface PlayLine {
	/** Seconds of the audio clock. */
	readonly when: number;
	/** Seconds of the music. */
	readonly position: Seconds;
	readonly rate: PlayRate;
	readonly loop: { readonly from: Seconds; readonly to: Seconds } | null;
}

/** Seconds of the music at an instant of the audio clock; before the line begins, where it will begin. */
export function positionOn({ when, position, rate, loop }: PlayLine, time: number): Seconds {
	const straight = position + Math.max(0, time - when) * rate;
	if (loop === null || straight < loop.to) return straight;
	return loop.from + ((straight - loop.from) % (loop.to - loop.from));
}

export interface Click {
	/** Seconds of the audio clock. */
	readonly time: number;
	readonly isBarStart: boolean;
}

/** The clicks that fall in [from, to) of the audio clock, loops unrolled. */
export function clicksBetween(line: PlayLine, { beats, barStarts }: ClickTrack, from: number, to: number): Click[] {
	const { when, position, rate, loop } = line;
	const straightAt = (time: number): number => position + Math.max(0, time - when) * rate;
	const first = straightAt(from);
	const end = straightAt(to);
	const clicks: Click[] = [];
	/** Beats in [low, high) of the music, heard `later` seconds of the music after their own place. */
	const take = (low: number, high: number, later: number): void => {
		for (let beat = firstAtLeast(beats, low); beat < beats.length && beats[beat] < high; beat++) {
			clicks.push({ time: when + (beats[beat] + later - position) / rate, isBarStart: barStarts.has(beat) });
		}
	};
	if (loop === null || end <= loop.to) {
		take(first, end, 0);
		return clicks;
	}
	if (first < loop.to) take(first, loop.to, 0);
	const length = loop.to - loop.from;
	for (let round = Math.max(1, Math.floor((first - loop.from) / length)); ; round++) {
		const later = round * length;
		if (loop.from + later >= end) return clicks;
		take(Math.max(loop.from, first - later), Math.min(loop.to, end - later), later);
	}
}

function firstAtLeast(beats: readonly number[], least: number): number {
	let low = 0;
	let high = beats.length;
	while (low < high) {
		const middle = (low + high) >> 1;
		if (beats[middle] < least) low = middle + 1;
		else high = middle;
	}
	return low;
}
