/**
 * Bytes → samples, by one implementation for page, worker and Node, so that the same file gives the same samples
 * everywhere, in whatever pieces it is read. The decoders are WebAssembly carried inside their packages: they fetch
 * nothing and touch no DOM.
 *
 * Encoder delay: mpg123 takes it off where the file's LAME tag names it; Ogg Vorbis, Opus and FLAC carry exact lengths.
 */
import { StarstaveError } from "../units/index.ts";
import type { ByteSource } from "./byte-source.ts";
import { recogniseFormat, type SoundFormat } from "./format.ts";
import { type Mp3Outline, outlineMp3, skipId3 } from "./mp3-frames.ts";
import { layOutWav, type WavLayout } from "./wav-chunks.ts";

/** What every decoder package answers with. */
interface Decoded {
	readonly channelData: readonly Float32Array[];
	readonly sampleRate: number;
}

/** What every decoder package offers for a file that comes piece by piece. */
interface PieceDecoder {
	decode(bytes: Uint8Array): Decoded;
	/** MP3 has none: its frames come out as they go in. */
	flush?(): Decoded;
	free(): void;
}

type DecodableFormat = Exclude<SoundFormat, "aac" | "unknown">;

/** Loaded when first used: a page that opens an MP3 never fetches the other decoders. */
const DECODERS: Record<DecodableFormat, () => Promise<PieceDecoder>> = {
	wav: async () => (await import("@audio/decode-wav")).decoder(),
	mp3: async () => (await import("@audio/decode-mp3")).decoder(),
	flac: async () => (await import("@audio/decode-flac")).decoder(),
	vorbis: async () => (await import("@audio/decode-vorbis")).decoder(),
	opus: async () => (await import("@audio/decode-opus")).decoder(),
};

const SPOKEN: Record<DecodableFormat, string> = {
	wav: "WAV",
	mp3: "MP3",
	flac: "FLAC",
	vorbis: "Ogg Vorbis",
	opus: "Opus",
};

/** Bytes that tell the format, past an ID3 tag. */
const TELLING = 1 << 17;
/** Bytes read at a time. */
const PIECE = 1 << 19;

/** Some samples of a soundtrack. */
export interface AudioPiece {
	/** Hz. */
	readonly sampleRate: number;
	/** One array a channel, −1..1, all of the same length, not empty. */
	readonly channels: readonly Float32Array[];
	/** How much of the file has been read with it, 0..1. */
	readonly share: number;
}

/** A soundtrack that is decoded as it is asked for. */
export interface AudioStream {
	readonly format: DecodableFormat;
	/**
	 * The samples from the first on; may be asked for again.
	 * @throws StarstaveError where the file can't be decoded, or holds no samples
	 */
	pieces(): AsyncGenerator<AudioPiece>;
	/** What the user should know of the file; whole once the pieces have come to their end. */
	notes(): readonly string[];
}

/**
 * Looks at a soundtrack and gets ready to decode it.
 * @param name the file's name, for messages only
 * @param pieceBytes bytes read and decoded at a time
 * @throws StarstaveError where the file is empty, is not audio, or is AAC (which only a browser decodes)
 */
export async function openAudio(source: ByteSource, name: string, pieceBytes = PIECE): Promise<AudioStream> {
	if (source.size === 0) {
		throw new StarstaveError("soundtrack", `${name} is empty: choose a WAV, MP3, FLAC, Ogg Vorbis or Opus file.`);
	}
	const tag = skipId3(await source.read(0, Math.min(10, source.size)));
	const format = recogniseFormat(await source.read(0, Math.min(source.size, tag + TELLING)));
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
	const layout = format === "wav" ? await layOutWav(source) : null;
	// The walk over the frames needs them all: of half an hour, some seventy million bytes at most.
	const outline = format === "mp3" ? outlineMp3(await source.read(0, source.size)) : null;
	const whole = { sampleRate: 0, channels: 0, broken: 0 };

	async function* pieces(): AsyncGenerator<AudioPiece> {
		Object.assign(whole, { sampleRate: 0, channels: 0, broken: 0 });
		let length = 0;
		for await (const { decoded, share } of decodePieces(source, format as DecodableFormat, layout, pieceBytes, name)) {
			const { channelData, sampleRate } = decoded;
			if ((channelData[0]?.length ?? 0) === 0 || !(sampleRate > 0)) continue;
			if (length === 0) {
				// The MP3 package hands mono out twice.
				whole.channels = outline?.mono ? 1 : channelData.length;
				whole.sampleRate = sampleRate;
			} else if (sampleRate !== whole.sampleRate) {
				throw new StarstaveError(
					"soundtrack",
					`${name} changes from ${whole.sampleRate} to ${sampleRate} Hz at ${(length / whole.sampleRate).toFixed(1)} s: convert it to one sample rate.`,
				);
			}
			const channels = Array.from({ length: whole.channels }, (_, c) => channelData[c] ?? channelData[0]);
			whole.broken += clearNotNumbers(channels);
			length += channels[0].length;
			yield { sampleRate, channels, share };
		}
		if (length === 0) {
			throw new StarstaveError("soundtrack", `${name} holds no sound: choose a file with at least a moment of audio.`);
		}
	}
	return { format, pieces, notes: () => [...describeFile(layout, outline), ...describeSamples(whole)] };
}

/** The file's bytes through its decoder. */
async function* decodePieces(
	source: ByteSource,
	format: DecodableFormat,
	layout: WavLayout | null,
	pieceBytes: number,
	name: string,
): AsyncGenerator<{ decoded: Decoded; share: number }> {
	let decoder: PieceDecoder | null = null;
	try {
		decoder = await DECODERS[format]();
		if (layout) yield { decoded: decoder.decode(layout.head), share: 0 };
		for (let at = layout?.start ?? 0; at < source.size; at += pieceBytes) {
			const to = Math.min(source.size, at + pieceBytes);
			yield { decoded: decoder.decode(await source.read(at, to)), share: to / source.size };
		}
		if (decoder.flush) yield { decoded: decoder.flush(), share: 1 };
	} catch (cause) {
		const why = cause instanceof Error ? ` (${cause.message.split("\n")[0]})` : "";
		throw new StarstaveError("soundtrack", `${name} looks like ${SPOKEN[format]} but can't be decoded${why}.`, {
			cause,
		});
	} finally {
		decoder?.free();
	}
}

/** Only the frames tell what is missing at the end of an MP3; a WAV's chunk does. */
function describeFile(layout: WavLayout | null, outline: Mp3Outline | null): string[] {
	const notes = layout?.note ? [layout.note] : [];
	if (outline === null) return notes;
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
	return notes;
}

/** Notes that hold for any format. */
function describeSamples(whole: { sampleRate: number; channels: number; broken: number }): string[] {
	const { sampleRate, channels, broken } = whole;
	const notes: string[] = [];
	if (sampleRate > 0 && sampleRate < 32_000) {
		notes.push(`${sampleRate / 1000} kHz, so nothing above ${sampleRate / 2000} kHz is heard.`);
	}
	if (channels === 1) notes.push("One channel (mono).");
	if (channels > 2) notes.push(`${COUNTS[channels] ?? channels} channels, mixed to mono for the analysis.`);
	if (broken > 0) notes.push(`${broken} samples were not numbers and are taken as silence.`);
	return notes;
}

const COUNTS = ["No", "One", "Two", "Three", "Four", "Five", "Six", "Seven", "Eight"];

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
