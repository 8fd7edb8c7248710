/**
 * Walks the frames of an MPEG audio file without decoding them: how many there are, whether the last is whole, what
 * the encoder says of itself. The decoder hears the music; this knows what the file promised.
 *
 * Sources: ISO/IEC 11172-3:1993 §2.4.1.3 (header), ISO/IEC 13818-3:1998 (half rates), id3.org ID3v2.4 (2000);
 * the Xing/Info frame and its LAME extension have no standard, only their writers' notes
 * (G. Bouvigne, "Mp3 Info Tag rev. 1", 2002).
 */

/** One frame's header. */
interface Frame {
	/** Byte offset in the file. */
	readonly at: number;
	/** Bytes. */
	readonly size: number;
	/** Hz. */
	readonly sampleRate: number;
	/** Samples a channel. */
	readonly samples: number;
	readonly mono: boolean;
	readonly version1: boolean;
}

/** What a walk over an MP3 file finds. */
export interface Mp3Outline {
	/** Hz. */
	readonly sampleRate: number;
	readonly mono: boolean;
	/** Whole frames of sound, the Xing/Info frame not counted. */
	readonly frames: number;
	/** Frames that the Xing/Info frame promises; null where there is none. */
	readonly promised: number | null;
	/** True where the file names its encoder's delay, which the decoder then takes off. */
	readonly gapless: boolean;
	/** True where the last frame is cut off. */
	readonly cutFrame: boolean;
}

const BITRATES_1 = [0, 32, 40, 48, 56, 64, 80, 96, 112, 128, 160, 192, 224, 256, 320];
const BITRATES_2 = [0, 8, 16, 24, 32, 40, 48, 56, 64, 80, 96, 112, 128, 144, 160];
const RATES_1 = [44_100, 48_000, 32_000];
/** Bytes of junk allowed before the first frame: some writers pad after a tag. */
const SEARCH = 65_536;

/** Byte offset past an ID3v2 tag, 0 where there is none. */
export function skipId3(bytes: Uint8Array): number {
	if (bytes.length < 10 || bytes[0] !== 0x49 || bytes[1] !== 0x44 || bytes[2] !== 0x33) return 0;
	const size = ((bytes[6] & 127) << 21) | ((bytes[7] & 127) << 14) | ((bytes[8] & 127) << 7) | (bytes[9] & 127);
	const footer = bytes[5] & 0x10 ? 10 : 0;
	return 10 + size + footer;
}

/** Reads a layer III header; null where there is none at `at`. */
function readFrame(bytes: Uint8Array, at: number): Frame | null {
	if (at + 4 > bytes.length || bytes[at] !== 0xff || (bytes[at + 1] & 0xe0) !== 0xe0) return null;
	const version = (bytes[at + 1] >> 3) & 3; // 0: 2.5, 2: 2, 3: 1
	const layer = (bytes[at + 1] >> 1) & 3; // 1: layer III
	const bitrateIndex = bytes[at + 2] >> 4;
	const rateIndex = (bytes[at + 2] >> 2) & 3;
	if (version === 1 || layer !== 1 || bitrateIndex === 0 || bitrateIndex === 15 || rateIndex === 3) return null;
	const version1 = version === 3;
	const sampleRate = RATES_1[rateIndex] / (version1 ? 1 : version === 2 ? 2 : 4);
	const bitrate = (version1 ? BITRATES_1 : BITRATES_2)[bitrateIndex] * 1000;
	const samples = version1 ? 1152 : 576;
	const padding = (bytes[at + 2] >> 1) & 1;
	const size = Math.floor(((samples / 8) * bitrate) / sampleRate) + padding;
	return { at, size, sampleRate, samples, mono: bytes[at + 3] >> 6 === 3, version1 };
}

/** The first frame that is followed by another of the same rate (or ends the file): two in a row are no accident. */
export function findFirstFrame(bytes: Uint8Array): Frame | null {
	const start = skipId3(bytes);
	const last = Math.min(bytes.length - 4, start + SEARCH);
	for (let at = start; at <= last; at++) {
		const frame = readFrame(bytes, at);
		if (frame === null) continue;
		const next = readFrame(bytes, at + frame.size);
		if (next !== null && next.sampleRate === frame.sampleRate) return frame;
		// A file of one frame: taken only where nothing stands before it, or noise would pass for music.
		if (at === start && at + frame.size >= bytes.length - 128) return frame;
	}
	return null;
}

const textAt = (bytes: Uint8Array, at: number): string =>
	String.fromCharCode(bytes[at] ?? 0, bytes[at + 1] ?? 0, bytes[at + 2] ?? 0, bytes[at + 3] ?? 0);

/** @returns null where the bytes hold no MPEG layer III frame */
export function outlineMp3(bytes: Uint8Array): Mp3Outline | null {
	const first = findFirstFrame(bytes);
	if (first === null) return null;
	const sideInfo = first.version1 ? (first.mono ? 17 : 32) : first.mono ? 9 : 17;
	const tag = first.at + 4 + sideInfo;
	const named = textAt(bytes, tag);
	const hasTag = named === "Xing" || named === "Info";
	const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
	let promised: number | null = null;
	let gapless = false;
	if (hasTag && tag + 8 <= bytes.length) {
		const flags = view.getUint32(tag + 4);
		if (flags & 1 && tag + 12 <= bytes.length) promised = view.getUint32(tag + 8);
		// The LAME extension follows the fields that the flags name: frames 4, bytes 4, seek table 100, quality 4.
		const extension = tag + 8 + (flags & 1 ? 4 : 0) + (flags & 2 ? 4 : 0) + (flags & 4 ? 100 : 0) + (flags & 8 ? 4 : 0);
		if (extension + 24 <= bytes.length) {
			gapless = (bytes[extension + 21] | bytes[extension + 22] | bytes[extension + 23]) !== 0;
		}
	}
	let frames = hasTag ? -1 : 0;
	let cutFrame = false;
	for (let at = first.at; at < bytes.length; ) {
		const frame = readFrame(bytes, at);
		if (frame === null) {
			at = nextFrame(bytes, at, first.sampleRate);
			continue;
		}
		if (at + frame.size > bytes.length) {
			cutFrame = true;
			break;
		}
		frames++;
		at += frame.size;
	}
	return { sampleRate: first.sampleRate, mono: first.mono, frames: Math.max(0, frames), promised, gapless, cutFrame };
}

/** Over junk (tags at the end, damage) to the next frame of the same rate that is followed by another. */
function nextFrame(bytes: Uint8Array, from: number, sampleRate: number): number {
	for (let at = from + 1; at + 4 <= bytes.length; at++) {
		const frame = readFrame(bytes, at);
		if (frame?.sampleRate !== sampleRate) continue;
		if (readFrame(bytes, at + frame.size)?.sampleRate === sampleRate) return at;
	}
	return bytes.length;
}
