import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { decodeAudio } from "../../../src/core/decode/index.ts";
import { analyse } from "../../../src/core/music/index.ts";
import { wavBytes } from "../decode/wav-bytes.ts";
import { playBand } from "./play-band.ts";

/**
 * Fixtures band.*: what `music()` gives, as a 16-bit WAV through FFmpeg 5.1: libmp3lame at 48 kbit/s, flac, libvorbis at
 * quality 2, libopus at 32 kbit/s.
 */
function music() {
	const band = playBand([{ bars: 8, beatsPerBar: 4, bpm: 126, song: 1, fullness: 1 }], 22_050);
	const peak = band.samples.reduce((most, x) => Math.max(most, Math.abs(x)), 0);
	return { ...band, samples: band.samples.map((x) => (0.8 * x) / peak) };
}

describe("beats don't depend on the file's format", () => {
	const band = music();
	const reference = decodeAudio(wavBytes([band.samples], 22_050), "band.wav").then(analyse);

	it("WAV: the band's own beats", async () => {
		const { beats } = await reference;
		expect(Math.abs(beats.length - band.beats.length)).toBeLessThanOrEqual(1);
		for (const beat of beats) {
			const nearest = Math.min(...band.beats.map((time) => Math.abs(time - beat)));
			// a first or last beat may be counted where the band does not play
			if (beat > band.beats[0] - 0.1 && beat < band.beats[band.beats.length - 1] + 0.1)
				expect(nearest).toBeLessThan(0.02);
		}
	});

	it.each(["band.mp3", "band.flac", "band.ogg", "band.opus"])("%s: within 5 ms of the WAV's", async (name) => {
		const bytes = new Uint8Array(readFileSync(new URL(`../decode/fixtures/${name}`, import.meta.url)));
		const [{ beats, bars }, expected] = [analyse(await decodeAudio(bytes, name)), await reference];
		// The last beat may be taken for an echo or not; all others are the same ones.
		const both = Math.min(beats.length, expected.beats.length);
		expect(Math.max(beats.length, expected.beats.length) - both).toBeLessThanOrEqual(1);
		expect(bars.filter((bar) => bar.beat < both)).toEqual(expected.bars.filter((bar) => bar.beat < both));
		for (let k = 0; k < both; k++) expect(Math.abs(beats[k] - expected.beats[k])).toBeLessThan(0.005);
	});
});
