import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { decodeAudio, openAudio, sourceOf } from "../../../src/core/decode/index.ts";
import { analyse, analysePieces } from "../../../src/core/music/index.ts";
import { playBand } from "../music/play-band.ts";
import { wavBytes } from "./wav-bytes.ts";

const fixture = (name: string): Uint8Array =>
	new Uint8Array(readFileSync(new URL(`./fixtures/${name}`, import.meta.url)));

const tone = Float32Array.from({ length: 30_000 }, (_, i) => Math.sin(i / 9) * 0.7);

/** All pieces of a file that is read `pieceBytes` at a time, and the largest stretch that was asked of it. */
async function gather(bytes: Uint8Array, pieceBytes: number) {
	let most = 0;
	const source = sourceOf(bytes);
	const watched = {
		size: source.size,
		read: (from: number, to: number) => {
			most = Math.max(most, to - from);
			return source.read(from, to);
		},
	};
	const stream = await openAudio(watched, "a", pieceBytes);
	const channels: number[][] = [];
	const shares: number[] = [];
	for await (const piece of stream.pieces()) {
		shares.push(piece.share);
		for (const [c, samples] of piece.channels.entries()) {
			channels[c] ??= [];
			for (const x of samples) channels[c].push(x);
		}
	}
	return { channels: channels.map((x) => Float32Array.from(x)), shares, notes: stream.notes(), most };
}

describe("a soundtrack that is decoded piece by piece", () => {
	it.each([
		["wav", wavBytes([tone, tone.map((x) => x / 2)], 44_100)],
		["wav with a chunk of odd size", wavBytes([tone], 44_100, true)],
		["mp3", fixture("pulses.mp3")],
		["mp3, mono", fixture("pulses-mono-untagged.mp3")],
		["flac", fixture("pulses.flac")],
		["vorbis", fixture("pulses.ogg")],
		["opus", fixture("pulses.opus")],
	])("%s: the same samples and notes in pieces of 1009 bytes as at once", async (_, bytes) => {
		const whole = await decodeAudio(bytes, "a");
		const parts = await gather(bytes, 1009);
		expect(parts.shares.length).toBeGreaterThan(3);
		expect(parts.shares.every((share, i) => share <= 1 && (i === 0 || share >= parts.shares[i - 1]))).toBe(true);
		expect(parts.channels).toEqual(whole.channels);
		expect(parts.notes).toEqual(whole.notes);
	});

	it("no more of a long file is asked for at once than tells its format", async () => {
		const long = wavBytes([new Float32Array(2_000_000)], 44_100);
		expect((await gather(long, 4096)).most).toBeLessThan(150_000);
	});

	it("is analysed as it is at once, and anew where its channels cancel", async () => {
		const { samples } = playBand([{ bars: 10, beatsPerBar: 4, bpm: 120, song: 0, fullness: 1 }], 22_050);
		for (const channels of [[samples], [samples, samples.map((x) => -x)]]) {
			const bytes = wavBytes(channels, 22_050);
			const whole = analyse(await decodeAudio(bytes, "a"));
			const stream = await openAudio(sourceOf(bytes), "a", 10_007);
			expect(await analysePieces(stream.pieces)).toEqual(whole);
			expect(whole.beats.length).toBeGreaterThan(30);
		}
	});
});
