import { StarstaveError } from "../units/index.ts";

/**
 * Timecode as SMPTE ST 12-1 counts it. At 29.97 frames a second (30 000 / 1001) drop-frame labels leave out 00 and 01 at
 * the start of every minute but each tenth, so that the labels keep up with the clock to 3.6 ms an hour; no frame itself
 * is dropped.
 */
export type TimecodeRate = "24" | "25" | "29.97" | "30";

export const TIMECODE_RATES: readonly TimecodeRate[] = ["24", "25", "29.97", "30"];

export interface Timecode {
	readonly rate: TimecodeRate;
	/** Label of the soundtrack's first sample, "01:00:00:00". */
	readonly start: string;
}

export const DEFAULT_TIMECODE: Timecode = { rate: "25", start: "01:00:00:00" };

/** Drop-frame: frames counted in ten minutes and in a minute that drops two. */
const FRAMES_IN_TEN_MINUTES = 17982;
const FRAMES_IN_DROPPING_MINUTE = 1798;

/** Labels a second. */
function labelsASecond(rate: TimecodeRate): number {
	return rate === "29.97" ? 30 : Number(rate);
}

/** Frames a second of real time. */
export function framesASecond(rate: TimecodeRate): number {
	return rate === "29.97" ? 30000 / 1001 : Number(rate);
}

function framesADay(rate: TimecodeRate): number {
	return rate === "29.97" ? 144 * FRAMES_IN_TEN_MINUTES : 86400 * labelsASecond(rate);
}

/**
 * Label → frames counted from 00:00:00:00.
 * @throws StarstaveError no hh:mm:ss:ff within a day, or a label that drop-frame leaves out
 */
export function framesOf(label: string, rate: TimecodeRate): number {
	const match = /^(\d{2}):(\d{2}):(\d{2})[:;](\d{2})$/.exec(label.trim());
	const [hours, minutes, seconds, frames] = match === null ? [24, 0, 0, 0] : match.slice(1).map(Number);
	const labels = labelsASecond(rate);
	if (hours > 23 || minutes > 59 || seconds > 59 || frames >= labels) {
		throw new StarstaveError(
			"command",
			`The timecode "${label}" can't be at ${rate} frames a second; it must be hh:mm:ss:ff within a day, ff from 00 to ${labels - 1}.`,
		);
	}
	const plain = ((hours * 60 + minutes) * 60 + seconds) * labels + frames;
	if (rate !== "29.97") return plain;
	if (seconds === 0 && frames < 2 && minutes % 10 !== 0) {
		throw new StarstaveError(
			"command",
			`The timecode "${label}" is one that drop-frame leaves out; the next that it counts is ${label.trim().slice(0, 9)}02.`,
		);
	}
	const allMinutes = hours * 60 + minutes;
	return plain - 2 * (allMinutes - Math.floor(allMinutes / 10));
}

function two(value: number): string {
	return String(value).padStart(2, "0");
}

/** Frames from 00:00:00:00 → label; a day goes round. Drop-frame is marked by a semicolon before the frames. */
export function labelOf(frames: number, rate: TimecodeRate): string {
	const day = framesADay(rate);
	let count = ((frames % day) + day) % day;
	if (rate === "29.97") {
		const tens = Math.floor(count / FRAMES_IN_TEN_MINUTES);
		const within = count % FRAMES_IN_TEN_MINUTES;
		// The first minute of ten keeps all its 1800 labels.
		count += 18 * tens + (within < 1800 ? 0 : 2 * (1 + Math.floor((within - 1800) / FRAMES_IN_DROPPING_MINUTE)));
	}
	const labels = labelsASecond(rate);
	const seconds = Math.floor(count / labels);
	const mark = rate === "29.97" ? ";" : ":";
	return `${two(Math.floor(seconds / 3600))}:${two(Math.floor(seconds / 60) % 60)}:${two(seconds % 60)}${mark}${two(count % labels)}`;
}

/**
 * The label of the frame nearest to a time of the show.
 * @param seconds from the soundtrack's first sample; before it where negative
 */
export function timecodeAt(seconds: number, timecode: Timecode): string {
	const frame = framesOf(timecode.start, timecode.rate) + Math.round(seconds * framesASecond(timecode.rate));
	return labelOf(frame, timecode.rate);
}
