/**
 * Bytes → samples, by one implementation for page, worker and Node, so that the same file gives the same samples
 * everywhere. The decoders are WebAssembly carried inside their packages: they fetch nothing and touch no DOM.
 *
 * Encoder delay: mpg123 takes it off where the file's LAME tag names it; Ogg Vorbis, Opus and FLAC carry exact lengths.
 */
import { StarstaveError } from "../units/index.ts";
import { recogniseFormat, type SoundFormat } from "./format.ts";
import { outlineMp3 } from "./mp3-frames.ts";
import type { Samples } from "./samples.ts";
import { describeWav, straightenWav } from "./wav-chunks.ts";

/** What every decoder package answers with. */
interface Decoded {
	readonly channelData: readonly Float32Array[];
	readonly sampleRate: number;
}

type Decoder = (bytes: Uint8Array) => Decoded | Promise<Decoded>;

/** Loaded when first used: a page that opens an MP3 never fetches the other decoders. */
const DECODERS: Record<Exclude<SoundFormat, "aac" | "unknown">, () => Promise<Decoder>> = {
	wav: async () => (await import("@audio/decode-wav")).default,
	mp3: async () => (await import("@audio/decode-mp3")).default,
	flac: async () => (await import("@audio/decode-flac")).default,
	vorbis: async () => (await import("@audio/decode-vorbis")).default,
	opus: async () => (await import("@audio/decode-opus")).default,
};

const SPOKEN: Record<SoundFormat, string> = {
	wav: "WAV",
	mp3: "MP3",
	flac: "FLAC",
	vorbis: "Ogg Vorbis",
	opus: "Opus",
	aac: "AAC",
	unknown: "unknown",
};

/**
 * Decodes a whole soundtrack.
 * @param bytes the file as it is
 * @param name the file's name, for messages only
 * @returns samples at the file's own rate, with notes on whatever is unusual about it
 * @throws StarstaveError where the file is empty, is not audio, holds no samples, or is AAC (which only a browser decodes)
 */
export async function decodeAudio(bytes: Uint8Array, name: string): Promise<Samples> {
	if (bytes.length === 0) {
		throw new StarstaveError("soundtrack", `${name} is empty: choose a WAV, MP3, FLAC, Ogg Vorbis or Opus file.`);
	}
	const format = recogniseFormat(bytes);
	if (format === "unknown") {
		throw new StarstaveError(
			"soundtrack",
			`${name} is not audio that can be read: choose a WAV, MP3, FLAC, Ogg Vorbis or Opus file.`,
		);
	}
	if (format === "aac") {
		throw new StarstaveError(
			"soundtrack",
			`${name} is AAC, which only the app in the browser can decode: open it there, or convert it to WAV or FLAC.`,
		);
	}
	let decoded: Decoded;
	try {
		decoded = await (await DECODERS[format]())(format === "wav" ? straightenWav(bytes) : bytes);
	} catch (cause) {
		const why = cause instanceof Error ? ` (${cause.message.split("\n")[0]})` : "";
		throw new StarstaveError("soundtrack", `${name} looks like ${SPOKEN[format]} but can't be decoded${why}.`, {
			cause,
		});
	}
	const notes: string[] = [];
	const channels = format === "mp3" ? describeMp3(bytes, decoded, notes) : [...decoded.channelData];
	if (format === "wav") describeWav(bytes, notes);
	return gatherSamples(channels, decoded.sampleRate, format, name, notes);
}

/**
 * Puts decoded channels into `Samples` and adds the notes that hold for any format. The browser uses it for AAC, which
 * it decodes by itself.
 * @throws StarstaveError where there are no samples
 */
export function gatherSamples(
	channels: readonly Float32Array[],
	sampleRate: number,
	format: string,
	name: string,
	notes: readonly string[] = [],
): Samples {
	const length = channels[0]?.length ?? 0;
	if (length === 0 || !(sampleRate > 0)) {
		throw new StarstaveError("soundtrack", `${name} holds no sound: choose a file with at least a moment of audio.`);
	}
	const said = [...notes];
	if (sampleRate < 32_000) {
		said.push(`${sampleRate / 1000} kHz, so nothing above ${sampleRate / 2000} kHz is heard.`);
	}
	if (channels.length === 1) said.push("One channel (mono).");
	if (channels.length > 2) said.push(`${spellCount(channels.length)} channels, mixed to mono for the analysis.`);
	const broken = clearNotNumbers(channels);
	if (broken > 0) said.push(`${broken} samples were not numbers and are taken as silence.`);
	return { sampleRate, channels, format, notes: said };
}

/** The wrapper hands mono out twice; and only the frames tell what is missing at the end. */
function describeMp3(bytes: Uint8Array, decoded: Decoded, notes: string[]): Float32Array[] {
	const outline = outlineMp3(bytes);
	const channels = [...decoded.channelData];
	if (outline === null) return channels;
	const perFrame = outline.sampleRate >= 32_000 ? 1152 : 576;
	const missing = outline.promised === null ? 0 : outline.promised - outline.frames;
	if (missing > 1) {
		const seconds = (missing * perFrame) / outline.sampleRate;
		notes.push(`The file is cut off: the last ${seconds.toFixed(1)} s are missing; what is there is used.`);
	} else if (outline.cutFrame) {
		notes.push("The file is cut off in its last frame; what is there is used.");
	}
	if (!outline.gapless) {
		notes.push(
			"This MP3 does not say how much silence its encoder put in front (usually 25 ms), so none is taken off.",
		);
	}
	return outline.mono ? channels.slice(0, 1) : channels;
}

/** Float WAVs may hold NaN and infinities, which would spread through every filter. @returns how many there were */
function clearNotNumbers(channels: readonly Float32Array[]): number {
	let count = 0;
	for (const channel of channels) {
		for (let i = 0; i < channel.length; i++) {
			const x = channel[i];
			// x − x is 0 for every finite number and NaN otherwise: one comparison a sample
			if (x - x !== 0) {
				channel[i] = 0;
				count++;
			}
		}
	}
	return count;
}

const COUNTS = ["No", "One", "Two", "Three", "Four", "Five", "Six", "Seven", "Eight"];
const spellCount = (n: number): string => COUNTS[n] ?? String(n);
