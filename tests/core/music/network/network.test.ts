import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { createListener, type Heard } from "../../../../src/core/music/listen.ts";
import { prepare } from "../../../../src/core/music/network/features.ts";
import { networkActivation } from "../../../../src/core/music/network/index.ts";
import { infer } from "../../../../src/core/music/network/infer.ts";
import { readBase64, readHalf, readWeights } from "../../../../src/core/music/network/weights.ts";

/** What PyTorch and numpy answered; `source` in the file says which, src/training/export.py how. */
const examples = JSON.parse(readFileSync(new URL("./fixtures/network-examples.json", import.meta.url), "utf8")) as {
	inputFrames: number;
	signalSeconds: number;
	logits: string;
	featureStep: number;
	features: string;
};

/** Logits: PyTorch sums in single precision, 61 000 products deep in ten layers. */
const LOGIT_TOLERANCE = 2e-4;
/** Features, in units of their spread: the chroma comes from a signal brought to a quarter of the rate. */
const MEL_TOLERANCE = 2e-3;
const CHROMA_TOLERANCE = 0.05;

const RATE = 22_050;
const ROWS = 72;

function hear(mono: Float32Array, rate: number): Heard {
	const listener = createListener(rate, 1);
	listener.push([mono]);
	return listener.finish();
}

function beatActivation(mono: Float32Array, rate: number, onProgress?: (share: number) => void) {
	const { bands, harmony } = hear(mono, rate);
	return networkActivation(bands, harmony, onProgress);
}

const floats = (text: string): Float32Array => new Float32Array(readBase64(text).slice().buffer);

/** The generator that the training side makes its example from (Numerical Recipes, 1992): −1 … 1. */
function congruential(count: number, seed = 1): Float64Array {
	let state = seed;
	return Float64Array.from({ length: count }, () => {
		state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
		return state / 2 ** 31 - 1;
	});
}

function exampleSignal(seconds: number): Float32Array {
	const out = congruential(seconds * RATE, 7).map((x) => 0.01 * x);
	for (let beat = 0; beat < 12; beat++) {
		for (const pitch of [48 + 5 * (beat % 3), 64 + 2 * (beat % 4)]) {
			const hz = 440 * 2 ** ((pitch - 69) / 12);
			for (let i = Math.ceil(beat * 0.5 * RATE); i < out.length; i++) {
				const since = i / RATE - beat * 0.5;
				out[i] += 0.3 * Math.exp(-6 * since) * Math.sin(2 * Math.PI * hz * since);
			}
		}
	}
	return Float32Array.from(out);
}

const largestDistance = (a: ArrayLike<number>, b: ArrayLike<number>): number => {
	expect(a.length).toBe(b.length);
	let most = 0;
	for (let i = 0; i < a.length; i++) most = Math.max(most, Math.abs(a[i] - b[i]));
	return most;
};

describe("beat network", () => {
	it("answers what PyTorch answers to the same input", () => {
		const input = Float32Array.from(congruential(examples.inputFrames * ROWS), (x) => 2 * x);
		const expected = floats(examples.logits);
		const logits = infer(input, readWeights());
		expect(Math.max(...expected) - Math.min(...expected)).toBeGreaterThan(1); // an answer worth comparing
		expect(largestDistance(logits, expected)).toBeLessThan(LOGIT_TOLERANCE);
	});

	it("hears what the training side hears", () => {
		const { bands, harmony } = hear(exampleSignal(examples.signalSeconds), RATE);
		const features = prepare(bands, harmony);
		const expected = floats(examples.features);
		let mel = 0;
		let chroma = 0;
		for (let i = 0; i < expected.length; i++) {
			const frame = Math.floor(i / ROWS) * examples.featureStep;
			const distance = Math.abs(features[frame * ROWS + (i % ROWS)] - expected[i]);
			if (i % ROWS < 48) mel = Math.max(mel, distance);
			else chroma = Math.max(chroma, distance);
		}
		expect(mel).toBeLessThan(MEL_TOLERANCE);
		expect(chroma).toBeLessThan(CHROMA_TOLERANCE);
	});

	it("answers the same wherever a track is cut, beyond its reach of 1025 frames", () => {
		const whole = Float32Array.from(congruential(1200 * ROWS, 3));
		const answer = infer(whole, readWeights());
		const cut = infer(whole.slice(0, 1101 * ROWS), readWeights());
		expect(largestDistance(cut.slice(0, 2 * 76), answer.slice(0, 2 * 76))).toBe(0);
		expect(largestDistance(cut.slice(2 * 1000), answer.slice(2 * 1000, 2 * 1101))).toBeGreaterThan(0.01);
	});

	it("hears the beats of clicks on the frame where they are", () => {
		const seconds = 20;
		const signal = Float32Array.from(congruential(seconds * 44_100, 5), (x) => 1e-4 * x);
		const noise = congruential(2000, 9);
		for (let beat = 0; beat < seconds * 2; beat++) {
			for (let i = 0; i < 2000; i++) {
				const at = beat * 22_050 + i;
				const strength = beat % 4 === 0 ? 0.9 : 0.5;
				if (at < signal.length) signal[at] += strength * Math.exp(-i / 300) * noise[i];
			}
		}
		const { beat, rate } = beatActivation(signal, 44_100);
		expect(rate).toBe(50);
		let on = 0;
		let off = 0;
		for (let k = 4; k < seconds * 2 - 4; k++) {
			on += Math.max(beat[k * 25 - 1], beat[k * 25], beat[k * 25 + 1]);
			off += Math.max(beat[k * 25 + 12], beat[k * 25 + 6]);
		}
		expect(on).toBeGreaterThan(3 * off);
	});

	it("stays quiet and finite on silence, and on nothing", () => {
		const { beat } = beatActivation(new Float32Array(44_100 * 5), 44_100);
		expect(beat.every((p) => p >= 0 && p < 0.5)).toBe(true);
		expect(beatActivation(new Float32Array(0), 44_100).beat.length).toBe(0);
	});

	it("tells how far it is, rising to one", () => {
		const shares: number[] = [];
		beatActivation(new Float32Array(44_100 * 10), 44_100, (share) => shares.push(share));
		expect(shares.length).toBeGreaterThan(10);
		expect(shares.every((share, i) => i === 0 || share >= shares[i - 1])).toBe(true);
		expect(shares[shares.length - 1]).toBe(1);
	});
});

describe("weights", () => {
	it("reads half-precision numbers as IEEE 754 has them", () => {
		// Bit patterns and values from IEEE 754-2008, binary16: one, −2, largest, smallest normal, smallest subnormal.
		const cases = [
			[0x3c00, 1],
			[0xc000, -2],
			[0x7bff, 65504],
			[0x0400, 2 ** -14],
			[0x0001, 2 ** -24],
			[0x3555, 0.333251953125],
		];
		for (const [bits, value] of cases) expect(readHalf(bits)).toBe(value);
		expect(readHalf(0xfc00)).toBe(Number.NEGATIVE_INFINITY);
		expect(readHalf(0x7e00)).toBeNaN();
	});

	it("reads base64 as RFC 4648 gives it", () => {
		for (const [text, bytes] of [
			["", ""],
			["Zg==", "f"],
			["Zm8=", "fo"],
			["Zm9v", "foo"],
			["Zm9vYmFy", "foobar"],
		]) {
			expect(String.fromCharCode(...readBase64(text))).toBe(bytes);
		}
	});

	it("refuses weights that aren't this network's", () => {
		expect(() => readWeights("AAAA")).toThrow(/60722 are needed/);
	});
});
