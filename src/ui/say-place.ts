import type { BeatMap } from "../core/show/index.ts";

/** "bar 33, beat 2" with a fraction where there is one; "2 beats before bar 1" in a pickup. */
export function sayPlace(position: number, beatMap: BeatMap, between = ", "): string {
	const { bar, beat } = barBeat(position, beatMap);
	if (bar < 1) return `${sayBeats(beatMap.positionOf(1) - position)} before bar 1`;
	return `bar ${bar}${between}beat ${trim(beat)}`;
}

/** "33.2", or "33.2+0.25" between beats: what the fields show and take. */
export function writePlace(position: number, beatMap: BeatMap): string {
	const { bar, beat } = barBeat(position, beatMap);
	const whole = Math.floor(beat);
	const rest = beat - whole;
	return rest > 0.0005 ? `${bar}.${whole}+${trim(rest)}` : `${bar}.${whole}`;
}

/** @returns the position in beats, or null where the text is no place: "33", "33.2" and "33.2+0.5" are */
export function readPlace(text: string, beatMap: BeatMap): number | null {
	const match = /^\s*(-?\d+)(?:\.(\d+))?(?:\s*\+\s*(\d*\.?\d+))?\s*$/.exec(text);
	if (!match) return null;
	return beatMap.positionOf(Number(match[1]), Number(match[2] ?? 1)) + Number(match[3] ?? 0);
}

/** 1:02.418 */
export function sayTime(seconds: number): string {
	const sign = seconds < 0 ? "−" : "";
	const milliseconds = Math.round(Math.abs(seconds) * 1000);
	const minutes = Math.floor(milliseconds / 60000);
	return `${sign}${minutes}:${((milliseconds % 60000) / 1000).toFixed(3).padStart(6, "0")}`;
}

/** "8.1 s" */
export function saySeconds(seconds: number): string {
	return `${seconds.toFixed(1)} s`;
}

/** "2.6 beats", "1 beat" */
export function sayBeats(beats: number): string {
	const text = Math.abs(beats) < 0.05 && beats !== 0 ? "<0.1" : trim(Math.round(beats * 10) / 10);
	return `${text} ${text === "1" ? "beat" : "beats"}`;
}

/** At most three decimals, none that say nothing. */
export function trim(value: number): string {
	return String(Math.round(value * 1000) / 1000);
}

function barBeat(position: number, beatMap: BeatMap): { bar: number; beat: number } {
	// A hair below a beat is that beat: 32.99999 must not read as bar 8, beat 4.999.
	const near = Math.round(position * 1000) / 1000;
	return beatMap.barAt(near);
}
