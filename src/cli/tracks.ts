import { existsSync } from "node:fs";
import { basename, dirname, join } from "node:path";
import { decodeAudio, type Samples } from "../core/decode/index.ts";
import { sha256Hex } from "../core/maths/index.ts";
import { type Analysis, analyse } from "../core/music/index.ts";
import { type Curve, type Show, type Soundtrack, toList } from "../core/show/index.ts";
import { StarstaveError } from "../core/units/index.ts";
import { readBytes } from "./files.ts";
import { cpuSince, type Progress, secondsSince } from "./progress.ts";

/** A soundtrack with everything heard in it. */
export interface Track {
	readonly bytes: Uint8Array;
	readonly samples: Samples;
	readonly soundtrack: Soundtrack;
	readonly analysis: Analysis;
	/** Seconds. */
	readonly timing: { readonly decode: number; readonly analyse: number; readonly cpu: number };
}

/** Bytes of an audio file → samples, and what the show remembers of it. */
export async function decodeTrack(
	bytes: Uint8Array,
	name: string,
): Promise<{ samples: Samples; soundtrack: Soundtrack }> {
	const samples = await decodeAudio(bytes, name);
	const soundtrack: Soundtrack = {
		file: basename(name),
		sha256: sha256Hex(bytes),
		duration: samples.channels[0].length / samples.sampleRate,
		sampleRate: samples.sampleRate,
		channels: samples.channels.length,
	};
	return { samples, soundtrack };
}

export async function hearTrack(bytes: Uint8Array, name: string, progress: Progress): Promise<Track> {
	const cpu = process.cpuUsage();
	const start = performance.now();
	progress.tell(0, `decoding ${basename(name)}`);
	const { samples, soundtrack } = await decodeTrack(bytes, name);
	const decoded = performance.now();
	const analysis = analyse(samples, { onProgress: (share, stage) => progress.tell(share, stage) });
	return {
		bytes,
		samples,
		soundtrack,
		analysis,
		timing: { decode: (decoded - start) / 1000, analyse: secondsSince(decoded), cpu: cpuSince(cpu) },
	};
}

/** Reads, decodes and analyses the audio file at `path`. */
export function hearFile(path: string, progress: Progress): Promise<Track> {
	return hearTrack(readBytes(path), path, progress);
}

/** Audio packed with a show. */
type Packed = { readonly name: string; readonly bytes: Uint8Array } | null;

/**
 * Bytes of the show's own soundtrack: the file that `--soundtrack` names, what is packed with the show, or the file of
 * its name beside the show.
 * @returns null where the show has none, or none was found and none was asked for
 * @throws StarstaveError where the audio is not the one that the show was cut to
 */
function readOwnTrack(show: Show, showPath: string, packed: Packed, named: string | undefined): Packed {
	const own = show.soundtrack;
	if (own === null) {
		if (named === undefined) return null;
		throw new StarstaveError("soundtrack", `${showPath} names no soundtrack; leave out --soundtrack ${named}.`);
	}
	const beside = join(dirname(showPath), own.file);
	let found = packed;
	if (named !== undefined) found = { name: named, bytes: readBytes(named) };
	else if (packed === null && existsSync(beside)) found = { name: beside, bytes: readBytes(beside) };
	// Told by its hash, before the time is spent on hearing it.
	if (found !== null && sha256Hex(found.bytes) !== own.sha256) {
		throw new StarstaveError(
			"soundtrack",
			`${found.name} is not the soundtrack that ${showPath} was cut to (${own.file}, SHA-256 ${own.sha256.slice(0, 12)}…); name that file with --soundtrack, or retime the show to the new edit.`,
		);
	}
	return found;
}

/** Whether anything in the show follows a curve of the music. */
export function followsMusic(show: Show): boolean {
	return toList(show.cues).some((cue) => cue.kind === "intensity" && typeof cue.level !== "number");
}

/**
 * The curves that the show's light follows. The audio is heard only where something follows it, but what is there is
 * always held against the show.
 * @returns null where the audio is not at hand
 */
export async function hearCurves(
	show: Show,
	showPath: string,
	packed: Packed,
	named: string | undefined,
	progress: Progress,
): Promise<readonly Curve[] | null> {
	const found = readOwnTrack(show, showPath, packed, named);
	if (!followsMusic(show)) return [];
	return found === null ? null : (await hearTrack(found.bytes, found.name, progress)).analysis.curves;
}

/** Samples of the show's own soundtrack; null where it is not at hand. */
export async function decodeOwnTrack(
	show: Show,
	showPath: string,
	packed: Packed,
	named: string | undefined,
	progress: Progress,
): Promise<Samples | null> {
	const found = readOwnTrack(show, showPath, packed, named);
	if (found === null) return null;
	progress.tell(0, `decoding ${basename(found.name)}`);
	return decodeAudio(found.bytes, found.name);
}
