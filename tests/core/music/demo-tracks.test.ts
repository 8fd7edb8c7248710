import { readdirSync, readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { decodeAudio } from "../../../src/core/decode/index.ts";
import { analyse } from "../../../src/core/music/index.ts";
import { boundaryF, eventF } from "../../oracles/music-metrics.ts";

// The demo pieces are composed and rendered by demo-tracks/compose, which writes the truth beside them: beats, bars and
// sections as the score has them. One of them changes tempo and metre.
interface Truth {
	readonly beats: number[];
	readonly downbeats: number[];
	readonly bars: { beat: number; beatsPerBar: number }[];
	readonly sections: { start: number; letter: string }[];
	readonly duration: number;
}

const folder = new URL("../../../demo-tracks/", import.meta.url);
const pieces = readdirSync(folder).filter((name) => /\.(ogg|mp3|opus|flac|wav)$/.test(name));

describe("the demo pieces are heard as they were composed", () => {
	it("there are at least two", () => {
		expect(pieces.length).toBeGreaterThanOrEqual(2);
	});

	it.each(pieces)("%s", async (name) => {
		const truth: Truth = JSON.parse(readFileSync(new URL(name.replace(/\.\w+$/, ".truth.json"), folder), "utf8"));
		const samples = await decodeAudio(new Uint8Array(readFileSync(new URL(name, folder))), name);
		const analysis = analyse(samples);
		expect(Math.abs(analysis.duration - truth.duration)).toBeLessThan(0.05);

		// F at ±70 ms, nothing left out at the start
		const downbeats = analysis.bars.map((bar) => analysis.beats[bar.beat]);
		expect(eventF([...analysis.beats], truth.beats, 0.07)).toBeGreaterThanOrEqual(0.98);
		expect(eventF(downbeats, truth.downbeats, 0.07)).toBeGreaterThanOrEqual(0.98);
		expect(analysis.confidence).toBeGreaterThan(0.4);

		// Bars have the score's metre, but for a bar on either side of a change.
		const metreAt = (time: number) =>
			analysis.bars.findLast((bar) => analysis.beats[bar.beat] <= time + 0.1)?.beatsPerBar;
		const right = truth.bars.filter((bar) => metreAt(truth.beats[bar.beat]) === bar.beatsPerBar).length;
		expect(right / truth.bars.length).toBeGreaterThan(0.95);

		const starts = analysis.sections.slice(1).map((section) => section.start);
		const wanted = truth.sections.slice(1).map((section) => section.start);
		expect(boundaryF(starts, wanted, 0.5)).toBeGreaterThan(0.6);
	});
});
