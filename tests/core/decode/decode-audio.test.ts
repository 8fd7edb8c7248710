import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { decodeAudio, recogniseFormat } from "../../../src/core/decode/index.ts";
import { StarstaveError } from "../../../src/core/units/index.ts";
import { wavBytes } from "./wav-bytes.ts";

// Fixtures: 3.3 s of 20 ms tone bursts, one every half second from 0 s, left 440 Hz, right 660 Hz; made with FFmpeg 5.1
// (libmp3lame, flac, libvorbis, libopus, aac) from its aevalsrc. The burst's first sample is a sine's zero, so the
// level of 0.1 is passed 3 to 4 samples later.
const fixture = (name: string): Uint8Array =>
	new Uint8Array(readFileSync(new URL(`./fixtures/${name}`, import.meta.url)));

/** Seconds at which a burst begins. */
function burstsOf(channel: Float32Array, sampleRate: number): number[] {
	const starts: number[] = [];
	let last = Number.NEGATIVE_INFINITY;
	for (let i = 0; i < channel.length; i++) {
		if (Math.abs(channel[i]) < 0.1) continue;
		if (i - last > sampleRate / 10) starts.push(i / sampleRate);
		last = i;
	}
	return starts;
}

const refusal = async (bytes: Uint8Array, name: string): Promise<string> => {
	const error: unknown = await decodeAudio(bytes, name).catch((e: unknown) => e);
	expect(error).toBeInstanceOf(StarstaveError);
	return error instanceof Error ? error.message : "";
};

describe("every format gives the same music at the same time", () => {
	it.each([
		["pulses.mp3", "mp3", 44_100],
		["pulses.flac", "flac", 44_100],
		["pulses.ogg", "vorbis", 44_100],
		["pulses.opus", "opus", 48_000],
	])("%s: bursts every half second from 0, within a millisecond, and the exact length", async (name, format, rate) => {
		const samples = await decodeAudio(fixture(name), name);
		expect(samples.format).toBe(format);
		expect(samples.sampleRate).toBe(rate);
		expect(samples.channels).toHaveLength(2);
		expect(samples.channels[0]).toHaveLength(3.3 * rate);
		expect(samples.notes).toEqual([]);
		const bursts = burstsOf(samples.channels[0], rate);
		expect(bursts).toHaveLength(7);
		bursts.forEach((start, i) => {
			expect(Math.abs(start - i / 2)).toBeLessThan(0.001);
		});
	});

	it("WAV samples come back as they were written", async () => {
		const left = Float32Array.from({ length: 4410 }, (_, i) => Math.sin(i / 9) * 0.7);
		const right = left.map((x) => -x / 2);
		const samples = await decodeAudio(wavBytes([left, right], 44_100), "a.wav");
		expect(samples.channels).toHaveLength(2);
		for (let i = 0; i < left.length; i++) {
			expect(Math.abs(samples.channels[0][i] - left[i])).toBeLessThan(1 / 16_384);
			expect(Math.abs(samples.channels[1][i] - right[i])).toBeLessThan(1 / 16_384);
		}
	});

	it("a chunk of odd size before the samples (padded by one byte, as RIFF says) does no harm", async () => {
		const tone = Float32Array.from({ length: 1000 }, (_, i) => Math.sin(i / 5));
		const samples = await decodeAudio(wavBytes([tone], 44_100, true), "odd.wav");
		expect(samples.channels[0]).toHaveLength(1000);
		expect(Math.abs(samples.channels[0][7] - tone[7])).toBeLessThan(1 / 16_384);
	});

	it("the file's name doesn't matter, its bytes do", async () => {
		expect((await decodeAudio(fixture("pulses.mp3"), "liar.wav")).format).toBe("mp3");
	});
});

describe("what is unusual is said", () => {
	it("an MP3 without a LAME tag: the encoder's delay is unknown and stays", async () => {
		const samples = await decodeAudio(fixture("pulses-mono-untagged.mp3"), "a.mp3");
		expect(samples.channels).toHaveLength(1);
		expect(samples.notes.join(" ")).toContain("does not say how much silence its encoder put in front");
		// 1105 samples: LAME's 576 and the decoder's 529 (LAME technical FAQ)
		expect(burstsOf(samples.channels[0], 44_100)[0]).toBeCloseTo(1105 / 44_100, 3);
	});

	it("a truncated MP3 gives what is there and says how much is missing", async () => {
		const whole = fixture("pulses.mp3");
		const samples = await decodeAudio(whole.subarray(0, whole.length / 2), "half.mp3");
		const seconds = samples.channels[0].length / 44_100;
		expect(seconds).toBeGreaterThan(1.3);
		expect(seconds).toBeLessThan(1.8);
		const said = /the last ([\d.]+) s are missing/.exec(samples.notes.join(" "));
		expect(Number(said?.[1]) + seconds).toBeCloseTo(3.3, 0);
		expect(burstsOf(samples.channels[0], 44_100)[0]).toBeLessThan(0.001);
	});

	it("a truncated WAV likewise", async () => {
		const whole = wavBytes([new Float32Array(44_100).fill(0.25)], 44_100);
		const samples = await decodeAudio(whole.subarray(0, 44 + 44_100), "half.wav");
		expect(samples.channels[0]).toHaveLength(22_050);
		expect(samples.notes.join(" ")).toContain("the last 0.5 s are missing");
	});

	it("8 kHz mono and six channels are taken", async () => {
		const tone = Float32Array.from({ length: 8000 }, (_, i) => Math.sin(i / 3));
		const low = await decodeAudio(wavBytes([tone], 8000), "phone.wav");
		expect(low.notes).toEqual(["8 kHz, so nothing above 4 kHz is heard.", "One channel (mono)."]);
		const six = await decodeAudio(wavBytes([tone, tone, tone, tone, tone, tone], 48_000), "six.wav");
		expect(six.channels).toHaveLength(6);
		expect(six.notes).toEqual(["Six channels, mixed to mono for the analysis."]);
	});

	it("NaN in a float WAV becomes silence", async () => {
		const bytes = new Uint8Array(44 + 12);
		bytes.set(wavBytes([new Float32Array(6)], 8000));
		const view = new DataView(bytes.buffer);
		view.setUint16(20, 3, true);
		view.setUint16(32, 4, true);
		view.setUint16(34, 32, true);
		[0.5, Number.NaN, -0.5].forEach((x, i) => {
			view.setFloat32(44 + 4 * i, x, true);
		});
		const samples = await decodeAudio(bytes, "nan.wav");
		expect([...samples.channels[0]]).toEqual([0.5, 0, -0.5]);
		expect(samples.notes.join(" ")).toContain("1 samples were not numbers");
	});
});

describe("what can't be read is refused in one sentence", () => {
	it("an empty file", async () => {
		expect(await refusal(new Uint8Array(0), "none.mp3")).toMatch(/^none\.mp3 is empty/);
	});

	it("a text, a picture, and noise", async () => {
		const text = new TextEncoder().encode("Dear client, here is the music.".repeat(500));
		expect(await refusal(text, "letter.mp3")).toMatch(/is not audio/);
		const png = new Uint8Array([0x89, 0x50, 0x4e, 0x47, 13, 10, 26, 10, ...new Array(500).fill(0)]);
		expect(await refusal(png, "a.png")).toMatch(/is not audio/);
		let seed = 1;
		const noise = Uint8Array.from({ length: 200_000 }, () => {
			seed = (Math.imul(seed, 1_664_525) + 1_013_904_223) >>> 0;
			return seed >>> 24;
		});
		expect(await refusal(noise, "noise.bin")).toMatch(/is not audio|can't be decoded|holds no sound/);
	});

	it("a WAV header without samples", async () => {
		expect(await refusal(wavBytes([new Float32Array(0)], 44_100), "head.wav")).toMatch(/holds no sound/);
	});

	it("AAC is recognised, bare and in MP4", async () => {
		expect(recogniseFormat(fixture("pulses.m4a"))).toBe("aac");
		expect(recogniseFormat(fixture("pulses.aac"))).toBe("aac");
		expect(await refusal(fixture("pulses.m4a"), "a.m4a")).toMatch(
			/is AAC, which only the app in the browser can decode/,
		);
	});
});
