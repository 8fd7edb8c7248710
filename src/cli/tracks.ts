import { existsSync } from "node:fs";
import { basename, dirname, join } from "node:path";
import {
	type AudioPiece,
	type ByteSource,
	decodeAudio,
	openAudio,
	type Samples,
	sourceOf,
} from "../core/decode/index.ts";
import { createSha256, sha256Hex } from "../core/maths/index.ts";
import { type Analysis, analysePieces } from "../core/music/index.ts";
import { type Curve, type Show, type Soundtrack, toList } from "../core/show/index.ts";
import { StarstaveError } from "../core/units/index.ts";
import { openFile, readBytes } from "./files.ts";
import { cpuSince, type Progress, secondsSince } from "./progress.ts";

/** A soundtrack with everything heard in it. */
export interface Track {
	readonly soundtrack: Soundtrack;
	readonly analysis: Analysis;
	/** What the user should know of the file and of the music. */
	readonly notes: readonly string[];
	/** Seconds. */
	readonly timing: { readonly decode: number; readonly analyse: number; readonly cpu: number };
}

/** Bytes of a source that are taken at a time for its hash. */
const HASHED = 1 << 20;

async function hashOf(source: ByteSource): Promise<string> {
	const digest = createSha256();
	for (let at = 0; at < source.size; at += HASHED) {
		digest.update(await source.read(at, Math.min(source.size, at + HASHED)));
	}
	return digest.hex();
}

/** Decodes and analyses a soundtrack piece by piece, holding no more of it than a piece. */
async function hear(source: ByteSource, path: string, progress: Progress): Promise<Track> {
	const cpu = process.cpuUsage();
	const start = performance.now();
	const name = basename(path);
	const stream = await openAudio(source, name);
	let decode = 0;
	async function* timed(): AsyncGenerator<AudioPiece> {
		let asked = performance.now();
		for await (const piece of stream.pieces()) {
			decode += secondsSince(asked);
			yield piece;
			asked = performance.now();
		}
		decode += secondsSince(asked);
	}
	const analysis = await analysePieces(timed, { onProgress: (share, stage) => progress.tell(share, stage) });
	const analyse = secondsSince(start) - decode;
	const { duration, sampleRate, channels } = analysis;
	return {
		soundtrack: { file: name, sha256: await hashOf(source), duration, sampleRate, channels },
		analysis,
		notes: [...stream.notes(), ...analysis.notes],
		timing: { decode, analyse, cpu: cpuSince(cpu) },
	};
}

/** Decodes and analyses the audio file at `path`. */
export async function hearFile(path: string, progress: Progress): Promise<Track> {
	const file = openFile(path);
	try {
		return await hear(file, path, progress);
	} finally {
		file.close();
	}
}

/** The same with the file's bytes and all of its samples, for what holds two soundtracks against each other. */
export async function hearWhole(
	path: string,
	progress: Progress,
): Promise<Track & { readonly bytes: Uint8Array; readonly samples: Samples }> {
	const bytes = readBytes(path);
	const track = await hear(sourceOf(bytes), path, progress);
	return { ...track, bytes, samples: await decodeAudio(bytes, basename(path)) };
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
	return found === null ? null : (await hear(sourceOf(found.bytes), found.name, progress)).analysis.curves;
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
