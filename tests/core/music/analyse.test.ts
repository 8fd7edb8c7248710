import { describe, expect, it } from "vitest";
import { createRandom } from "../../../src/core/maths/index.ts";
import { type Analysis, analyse, DOUBTFUL } from "../../../src/core/music/index.ts";
import { StarstaveError } from "../../../src/core/units/index.ts";
import { beatF, eventF } from "../../oracles/music-metrics.ts";
import { type Part, type Performance, playBand, playMumble, playNoise } from "./play-band.ts";

const RATE = 44_100;
const hear = (samples: Float32Array, rate = RATE): Analysis => analyse({ channels: [samples], sampleRate: rate });
const downbeatsOf = (analysis: Analysis): number[] => analysis.bars.map((bar) => analysis.beats[bar.beat]);

const part = (change: Partial<Part> = {}): Part => ({
	bars: 16,
	beatsPerBar: 4,
	bpm: 120,
	song: 0,
	fullness: 1,
	...change,
});

/** Beats and downbeats within 30 ms, much closer than the 70 ms that beat trackers are usually given. */
function expectRight(analysis: Analysis, truth: Performance): void {
	expect(eventF([...analysis.beats], truth.beats, 0.03)).toBeGreaterThan(0.97);
	expect(eventF(downbeatsOf(analysis), truth.downbeats, 0.03)).toBeGreaterThan(0.95);
}

describe("beats and bars of music whose beats are known", () => {
	it.each([
		["common time at 120", [part()]],
		["common time at 92", [part({ bpm: 92 })]],
		["three in a bar at 132", [part({ bpm: 132, beatsPerBar: 3, bars: 24 })]],
		["another tempo from the middle on", [part({ bars: 16 }), part({ bars: 12, bpm: 100, song: 1 })]],
		["another metre from the middle on", [part({ bars: 12 }), part({ bars: 16, beatsPerBar: 3, song: 1 })]],
	])("%s", (_, parts) => {
		const truth = playBand(parts);
		const analysis = hear(truth.samples);
		expectRight(analysis, truth);
		expect(analysis.confidence).toBeGreaterThan(0.4);
		expect(Math.abs(analysis.tempo.bpm / parts[0].bpm - 1)).toBeLessThan(0.02);
	});

	it("is counted on through a stretch in which nothing keeps time, and that stretch is doubtful", () => {
		const truth = playBand([part({ bars: 12 })]);
		const random = createRandom(3);
		let slow = 0;
		const noise = Float32Array.from({ length: 15 * RATE }, () => {
			slow = 0.98 * slow + 0.02 * (random.next() - 0.5);
			return 2 * slow;
		});
		const [a, b] = [truth.samples.length, truth.samples.length + noise.length];
		const whole = new Float32Array(a + b);
		whole.set(truth.samples);
		whole.set(noise, a);
		whole.set(truth.samples, b);
		const { beats, beatConfidence } = hear(whole);
		const within = [...beats.keys()].filter((k) => beats[k] > a / RATE + 2 && beats[k] < b / RATE - 2);
		const longest = Math.max(...Array.from(beats.subarray(1), (beat, k) => beat - beats[k]));
		expect(longest).toBeLessThan(2);
		expect(within.length).toBeGreaterThan(6);
		const doubtful = within.filter((k) => beatConfidence[k] < DOUBTFUL).length;
		expect(doubtful).toBeGreaterThan(0.9 * within.length);
	});

	it("silence at either end gets no beats", () => {
		const truth = playBand([part({ bars: 12 })], RATE, 6);
		const samples = new Float32Array(truth.samples.length + 8 * RATE);
		samples.set(truth.samples);
		const { beats } = hear(samples);
		expect(beats[0]).toBeGreaterThan(5.5);
		expect(beats[beats.length - 1]).toBeLessThan(truth.beats[truth.beats.length - 1] + 1.5);
	});

	it("the beat goes on through two bars of silence", () => {
		const truth = playBand([part({ bars: 8 }), part({ bars: 2, fullness: 0 }), part({ bars: 8 })]);
		expect(eventF([...hear(truth.samples).beats], truth.beats, 0.05)).toBeGreaterThan(0.93);
	});
});

describe("sections", () => {
	const truth = playBand([
		part({ bars: 8, fullness: 0.3 }),
		part({ bars: 16, song: 1 }),
		part({ bars: 8, fullness: 0.3 }),
		part({ bars: 16, song: 1 }),
	]);
	const analysis = hear(truth.samples);

	it("begin on the bars where the music changes", () => {
		const starts = analysis.sections.map((section) => section.start);
		for (const start of truth.starts.slice(1)) {
			expect(Math.min(...starts.map((time) => Math.abs(time - start)))).toBeLessThan(0.1);
		}
	});

	it("the same music has the same letter, other music another", () => {
		const letterAt = (time: number) => analysis.sections.find((s) => time >= s.start && time < s.end)?.letter;
		const letters = truth.starts.map((start) => letterAt(start + 4));
		expect(letters[0]).toBe("A");
		expect(letters[2]).toBe(letters[0]);
		expect(letters[3]).toBe(letters[1]);
		expect(letters[1]).not.toBe(letters[0]);
	});

	it("cover the music from the first beat to the last without a gap, on bar lines", () => {
		const { sections, beats, bars } = analysis;
		expect(sections[0].fromBeat).toBe(0);
		expect(sections[0].start).toBe(beats[0]);
		expect(sections[sections.length - 1].toBeat).toBe(beats.length);
		const lines = new Set(bars.map((bar) => bar.beat));
		for (let i = 1; i < sections.length; i++) {
			expect(sections[i].fromBeat).toBe(sections[i - 1].toBeat);
			expect(sections[i].start).toBe(sections[i - 1].end);
			expect(lines.has(sections[i].fromBeat)).toBe(true);
		}
	});

	it("more detail never means fewer sections", () => {
		const counts = [0, 0.5, 1].map(
			(detail) => analyse({ channels: [truth.samples], sampleRate: RATE }, { detail }).sections.length,
		);
		for (let i = 1; i < counts.length; i++) expect(counts[i]).toBeGreaterThanOrEqual(counts[i - 1]);
	});

	it("where the full band comes in there is a drop, where it goes a break", () => {
		const kindsNear = (time: number) =>
			analysis.moments.filter((m) => Math.abs(analysis.beats[m.beat] - time) < 1).map((m) => m.kind);
		expect(kindsNear(truth.starts[1])).toContain("drop");
		expect(kindsNear(truth.starts[2])).toContain("break");
	});
});

describe("what comes with it", () => {
	const truth = playBand([part({ bars: 8 })]);
	const analysis = hear(truth.samples);

	it("five curves within 0..1 that reach well up, as long as the music", () => {
		expect(analysis.curves.map((curve) => curve.name)).toEqual(["loudness", "low", "middle", "high", "onset"]);
		for (const curve of analysis.curves) {
			expect(curve.values.every((x) => x >= 0 && x <= 1)).toBe(true);
			expect(Math.max(...curve.values)).toBeGreaterThan(0.8);
			expect(Math.abs(curve.values.length / curve.rate - analysis.duration)).toBeLessThan(0.5);
		}
	});

	it("the onset curve is high at the beats and low between", () => {
		const onset = analysis.curves[4];
		const at = (time: number) => Math.max(...[-1, 0, 1, 2].map((k) => onset.values[Math.round(time * onset.rate) + k]));
		for (const beat of truth.beats.slice(4)) expect(at(beat)).toBeGreaterThan(at(beat + 0.12));
	});

	it("peaks hold the lowest and highest sample of each stretch", () => {
		const { values, rate } = analysis.peaks;
		expect(values.length).toBe(2 * Math.ceil(analysis.duration * rate));
		const i = Math.round(truth.beats[4] * rate) + 1;
		const stretch = truth.samples.slice(Math.round((i * RATE) / rate), Math.round(((i + 1) * RATE) / rate));
		expect(values[2 * i]).toBeCloseTo(Math.min(0, ...stretch), 6);
		expect(values[2 * i + 1]).toBeCloseTo(Math.max(0, ...stretch), 6);
	});

	it("progress is told at least twenty times and only rises", () => {
		const told: number[] = [];
		analyse({ channels: [truth.samples], sampleRate: RATE }, { onProgress: (share) => told.push(share) });
		expect(told.length).toBeGreaterThanOrEqual(20);
		for (let i = 1; i < told.length; i++) expect(told[i]).toBeGreaterThanOrEqual(told[i - 1]);
		expect(told[told.length - 1]).toBe(1);
	});

	it("the same samples give the same answer", () => {
		expect(hear(truth.samples)).toEqual(analysis);
	});
});

describe("an honest answer to anything", () => {
	const expectNone = (analysis: Analysis): void => {
		expect(analysis.beats).toHaveLength(0);
		expect(analysis.bars).toHaveLength(0);
		expect(analysis.sections).toHaveLength(0);
		expect(analysis.confidence).toBe(0);
		expect(analysis.notes.join(" ")).toMatch(/No beat was found/);
	};
	const expectDoubt = (analysis: Analysis): void => {
		// Below this the analysis tells the user that it is in doubt; noise and mumbling come to about 0.27.
		expect(analysis.confidence).toBeLessThan(0.35);
		expect(analysis.notes.join(" ")).toMatch(/No beat was found|beat is uncertain/);
	};

	it("silence: none, and it says so", () => {
		const analysis = hear(new Float32Array(RATE));
		expectNone(analysis);
		expect(analysis.notes.join(" ")).toContain("silent");
		expectNone(hear(new Float32Array(20 * RATE)));
	});

	it("a sine: none", () => {
		expectNone(
			hear(Float32Array.from({ length: 20 * RATE }, (_, i) => 0.5 * Math.sin((2 * Math.PI * 440 * i) / RATE))),
		);
	});

	it("white noise and mumbling: none, or low confidence", () => {
		expectDoubt(hear(playNoise(30, RATE)));
		expectDoubt(hear(playMumble(30, RATE)));
	});

	it("one sample, a tenth of a second, one second, three seconds", () => {
		const truth = playBand([part({ bars: 4 })]);
		for (const seconds of [1 / RATE, 0.1, 1, 3]) {
			const analysis = hear(truth.samples.slice(0, Math.round(seconds * RATE)));
			expect(analysis.duration).toBeCloseTo(seconds, 4);
			for (const beat of analysis.beats) expect(beat).toBeLessThanOrEqual(seconds);
		}
	});

	it("pink noise, and a single click: none, or low confidence", () => {
		const random = createRandom(21);
		// Voss and McCartney: sixteen sources of noise, each held twice as long as the one before.
		const held = new Float64Array(16);
		const pink = Float32Array.from({ length: 20 * RATE }, (_, i) => {
			for (let k = 0; k < 16; k++) if (i % 2 ** k === 0) held[k] = random.next() - 0.5;
			return held.reduce((sum, x) => sum + x, 0) / 16;
		});
		expect(hear(pink).confidence).toBeLessThan(DOUBTFUL);
		const click = new Float32Array(10 * RATE);
		click[3 * RATE] = 1;
		expect(hear(click).confidence).toBeLessThan(DOUBTFUL);
	});

	it("music that stands off the middle, or is recorded at 96 kHz: still right", () => {
		const truth = playBand([part()]);
		expectRight(hear(truth.samples.map((x) => 0.5 * x + 0.4)), truth);
		const fine = playBand([part()], 96_000);
		expectRight(hear(fine.samples, 96_000), fine);
	});

	it("clipped to a fifth: still right", () => {
		const truth = playBand([part()]);
		expectRight(hear(truth.samples.map((x) => Math.max(-0.2, Math.min(0.2, x * 2)))), truth);
	});

	it("one channel dead, or both in opposite phase: still right", () => {
		const truth = playBand([part()]);
		const dead = analyse({ channels: [truth.samples, new Float32Array(truth.samples.length)], sampleRate: RATE });
		expectRight(dead, truth);
		const opposite = analyse({ channels: [truth.samples, truth.samples.map((x) => -x)], sampleRate: RATE });
		expectRight(opposite, truth);
	});

	it("8 kHz: still right", () => {
		const truth = playBand([part()], 8000);
		expectRight(hear(truth.samples, 8000), truth);
	});

	it("no samples at all is an error that says what is wrong", () => {
		expect(() => hear(new Float32Array(0))).toThrow(StarstaveError);
		expect(() => hear(new Float32Array(0))).toThrow(/no samples/);
	});
});

describe("the oracle can fail", () => {
	it("beats a tenth of a second late are not right", () => {
		const truth = playBand([part({ bars: 8 })]);
		expect(
			beatF(
				truth.beats.map((time) => time + 0.1),
				truth.beats,
			),
		).toBe(0);
	});
});
