import { describe, expect, it } from "vitest";
import {
	compileLight,
	findFlashes,
	type LightProgram,
	lightAt,
	toCoded,
	toLinear,
} from "../../../src/core/light/index.ts";
import { type Curve, type FleetSlots, readShow, type Stay } from "../../../src/core/show/index.ts";

const COUNT = 4;
/** Four slots in a row; beats every half second from 0. */
function program(
	cues: object[],
	options: { stays?: Stay[]; curves?: Curve[]; colours?: boolean; formations?: string[]; groups?: object[] } = {},
): LightProgram {
	const ids = options.formations ?? ["f"];
	const show = readShow(
		JSON.stringify({
			format: "starstave-show",
			version: 1,
			fleet: { count: COUNT },
			grid: { beats: Array.from({ length: 200 }, (_, i) => i * 0.5), bars: [] },
			opening: ids[0],
			groups: options.groups ?? [],
			formations: ids.map((id) => ({ id, shape: { kind: "line", count: COUNT, length: 9 }, groups: { ends: [0, 3] } })),
			cues: cues.map((cue, i) => ({ id: `c${i}`, number: String(i + 1), ...cue })),
		}),
	);
	const slots: FleetSlots = {
		count: COUNT,
		fleet: COUNT,
		positions: Float64Array.of(0, 0, 20, 3, 0, 20, 6, 0, 20, 9, 0, 20),
		all: Float64Array.of(0, 0, 20, 3, 0, 20, 6, 0, 20, 9, 0, 20),
		colours: options.colours ? Uint8Array.of(255, 0, 0, 0, 255, 0, 0, 0, 255, 255, 255, 255) : null,
		groups: new Map([["ends", Int32Array.of(0, 3)]]),
	};
	const rows = Int32Array.of(0, 1, 2, 3);
	const stays = options.stays ?? [
		{ formation: ids[0], arrives: -Infinity, departs: Infinity, cue: null, slotOfDrone: rows },
	];
	return compileLight(show, stays, new Map(ids.map((id) => [id, slots])), options.curves ?? []);
}
const at = (light: LightProgram, seconds: number): number[] => {
	const out = new Uint8Array(3 * COUNT);
	lightAt(light, seconds, out);
	return [...out];
};
const flat = (colour: string) => ({ kind: "flat", colour });
const RED = { kind: "colour", at: 0, paint: flat("#ff0000") };
const FULL = { kind: "intensity", at: 0, level: 1 };

describe("light of each drone", () => {
	it("is dark before the first cue: the fleet waits unlit", () => {
		const light = program([
			{ ...RED, at: 4 },
			{ ...FULL, at: 4 },
		]);
		expect(at(light, 1)).toEqual(new Array(12).fill(0));
		expect(at(light, 2.01).slice(0, 3)).toEqual([255, 0, 0]);
	});

	it("gives the later cue the slots, then the later in the list, and a group only its own", () => {
		const light = program([
			RED,
			FULL,
			{ ...RED, at: 8, paint: flat("#0000ff") },
			{ ...RED, at: 8, paint: flat("#00ff00"), group: "ends" },
		]);
		expect(at(light, 3)).toEqual([255, 0, 0, 255, 0, 0, 255, 0, 0, 255, 0, 0]);
		expect(at(light, 5)).toEqual([0, 255, 0, 0, 0, 255, 0, 0, 255, 0, 255, 0]);
	});

	it("looks a group up among the show's drones first", () => {
		const light = program([RED, FULL, { ...RED, at: 2, paint: flat("#0000ff"), group: "ends" }], {
			groups: [{ id: "g", name: "ends", drones: [1] }],
		});
		expect(at(light, 3)).toEqual([255, 0, 0, 0, 0, 255, 255, 0, 0, 255, 0, 0]);
	});

	it("blends and dims in linear light: half of it is byte 188 (IEC 61966-2-1)", () => {
		const light = program([
			{ ...RED, paint: flat("#ffffff") },
			{ ...FULL, level: 0.5 },
		]);
		expect(at(light, 3).slice(0, 3)).toEqual([188, 188, 188]);
	});

	it("fades from what was shown, a fade that was cut off too", () => {
		const fade = (at_: number, level: number) => ({ kind: "intensity", at: at_, level, fade: 8 });
		const light = program([{ ...RED, paint: flat("#ffffff") }, { ...FULL, at: 0 }, fade(8, 0), fade(12, 1)]);
		const low = program([
			{ ...RED, paint: flat("#ffffff") },
			{ ...FULL, at: 0, level: 0.2 },
			fade(8, 1),
			fade(12, 0.2),
		]);
		// 0.2 rises to 0.6 by 6 s, and sinks from there.
		expect(toLinear(at(low, 9)[0] / 255)).toBeCloseTo(0.6 - 0.4 * 0.75, 2);
		// The second fade begins at 6 s, half way down the first.
		const half = at(light, 6)[0];
		expect(half).toBe(Math.round(255 * toCoded(0.5)));
		expect(at(light, 6.001)[0]).toBeGreaterThanOrEqual(half - 1);
		expect(toLinear(at(light, 8)[0] / 255)).toBeCloseTo(0.75, 1);
		expect(at(light, 10)[0]).toBe(255);
	});

	it("follows a curve of the music between two levels", () => {
		const values = Float32Array.from({ length: 100 }, (_, i) => i / 99);
		const light = program(
			[
				{ ...RED, paint: flat("#ffffff") },
				{ ...FULL, level: { follow: "loudness", from: 0.2, to: 1 } },
			],
			{
				curves: [{ name: "loudness", rate: 10, values }],
			},
		);
		expect(toLinear(at(light, 4.95)[0] / 255)).toBeCloseTo(0.2 + 0.8 * 0.5, 1);
	});

	it("shows the formation's own colours as a picture, a gradient from end to end", () => {
		expect(at(program([{ ...RED, paint: { kind: "picture" } }, FULL], { colours: true }), 1)).toEqual([
			255, 0, 0, 0, 255, 0, 0, 0, 255, 255, 255, 255,
		]);
		const gradient = at(
			program([{ ...RED, paint: { kind: "gradient", from: "#000000", to: "#ffffff", axis: "right" } }, FULL]),
			1,
		);
		expect([gradient[0], gradient[9]]).toEqual([0, 255]);
		expect(toLinear(gradient[3] / 255)).toBeCloseTo(1 / 3, 1);
	});

	it("answers the same whatever was asked before", () => {
		const cues = [
			RED,
			FULL,
			{ kind: "colour", at: 6, paint: { kind: "swell", colour: "#80ff40", every: 2, floor: 0.2 }, fade: 3 },
			{ kind: "colour", at: 20, paint: { kind: "glint", colour: "#ffffff" } },
		];
		const light = program(cues);
		const times = [0.1, 3.3, 4.05, 9.9, 12.4, 30];
		const forward = times.map((time) => at(light, time));
		const backward = [...times]
			.reverse()
			.map((time) => at(program(cues), time))
			.reverse();
		expect(backward).toEqual(forward);
		expect(
			[...times]
				.reverse()
				.map((time) => at(light, time))
				.reverse(),
		).toEqual(forward);
	});
});

describe("light on the way from formation to formation", () => {
	const rows = Int32Array.of(0, 1, 2, 3);
	const stays: Stay[] = [
		{ formation: "f", arrives: -Infinity, departs: 10, cue: null, slotOfDrone: rows },
		{ formation: "g", arrives: 20, departs: Infinity, cue: "c2", slotOfDrone: rows },
	];
	const way = (light: string) =>
		program(
			[{ ...RED, paint: flat("#ffffff") }, FULL, { kind: "transition", at: 20, length: 20, formation: "g", light }],
			{ stays, formations: ["f", "g"] },
		);

	it("keeps, dims or darkens as the transition says, and is whole again on arrival", () => {
		const half = Object.fromEntries(
			["keep", "dim", "dark", "crossfade"].map((light) => [light, at(way(light), 15)[0]]),
		);
		expect(half.keep).toBe(255);
		expect(half.dark).toBe(0);
		expect(half.dim).toBeGreaterThan(0);
		expect(half.dim).toBeLessThan(255);
		expect(half.crossfade).toBe(255);
		for (const light of ["keep", "dim", "dark", "crossfade"]) {
			expect(at(way(light), 9.99)[0]).toBe(255);
			expect(at(way(light), 20.01)[0]).toBe(255);
		}
	});
});

describe("flashes (WCAG 2.2, 2.3.1: more than three general or red flashes in any one second)", () => {
	const pulses = (hertz: number, dark: string, bright: string): LightProgram => {
		// Steps at twice the rate: one flash is there and back.
		const steps = Array.from({ length: Math.round(8 * hertz) }, (_, i) => ({
			kind: "colour",
			at: i / hertz,
			paint: flat(i % 2 ? bright : dark),
		}));
		return program([FULL, ...steps]);
	};

	it("lets two a second pass and tells of five", () => {
		expect(findFlashes(pulses(2, "#000000", "#ffffff"), 0, 4)).toEqual([]);
		const found = findFlashes(pulses(5, "#000000", "#ffffff"), 0, 4);
		expect(found.length).toBeGreaterThan(0);
		expect(found[0]).toMatchObject({ kind: "general", drones: COUNT });
		expect(found[0].most).toBeGreaterThan(3);
	});

	it("lets changes below a tenth of the luminance pass, and those whose darker state is bright", () => {
		expect(findFlashes(pulses(5, "#808080", "#8c8c8c"), 0, 4)).toEqual([]);
		expect(findFlashes(pulses(5, "#f0f0f0", "#ffffff"), 0, 4)).toEqual([]);
	});

	it("tells of saturated red by its own rule", () => {
		expect(findFlashes(pulses(5, "#300000", "#ff0000"), 0, 4).map(({ kind }) => kind)).not.toEqual([]);
		expect(findFlashes(pulses(5, "#6f6f6f", "#ff0000"), 0, 4).some(({ kind }) => kind === "red")).toBe(true);
	});
});
