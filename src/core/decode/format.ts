/**
 * What a file is, told by its first bytes and never by its name.
 *
 * Sources: RIFF/WAVE (Microsoft, IBM 1991), RFC 9639 (FLAC), RFC 3533 (Ogg), RFC 7845 (Ogg Opus), Vorbis I (2004),
 * ISO/IEC 11172-3 and 13818-3 (MPEG audio), id3.org ID3v2.4 (2000), ISO/IEC 14496-12 (MP4).
 */
import { findFirstFrame, skipId3 } from "./mp3-frames.ts";

/** `aac` is AAC bare or in an MP4: only a browser can decode it. `unknown` is nothing that is read. */
export type SoundFormat = "wav" | "mp3" | "flac" | "vorbis" | "opus" | "aac" | "unknown";

const startsWith = (bytes: Uint8Array, at: number, text: string): boolean => {
	if (at + text.length > bytes.length) return false;
	for (let i = 0; i < text.length; i++) if (bytes[at + i] !== text.charCodeAt(i)) return false;
	return true;
};

/** The codec of an Ogg file stands in the first packet of its first page. */
function oggCodec(bytes: Uint8Array): SoundFormat {
	const packet = 27 + (bytes[26] ?? 0);
	if (startsWith(bytes, packet, "OpusHead")) return "opus";
	if (startsWith(bytes, packet, "\x01vorbis")) return "vorbis";
	if (startsWith(bytes, packet, "\x7fFLAC")) return "flac";
	return "unknown";
}

/** The format of a whole file from its first bytes. */
export function recogniseFormat(bytes: Uint8Array): SoundFormat {
	if (startsWith(bytes, 0, "RIFF") && startsWith(bytes, 8, "WAVE")) return "wav";
	if (startsWith(bytes, 0, "OggS")) return oggCodec(bytes);
	if (startsWith(bytes, 4, "ftyp")) return "aac";
	// An ID3v2 tag may stand before MP3, and, against the rules but often, before FLAC and AAC.
	const start = skipId3(bytes);
	if (startsWith(bytes, start, "fLaC")) return "flac";
	// ADTS: twelve sync bits, then layer 0, which MPEG audio has no use for.
	if (bytes[start] === 0xff && (bytes[start + 1] & 0xf6) === 0xf0) return "aac";
	return findFirstFrame(bytes) === null ? "unknown" : "mp3";
}
