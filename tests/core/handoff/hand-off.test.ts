import { strFromU8, unzipSync } from "fflate";
import { describe, expect, it } from "vitest";
import { careFor, flyShow, type Leg, type ShowFlight } from "../../../src/core/flight/index.ts";
import { fleetSlotsOf, takeoffSlots } from "../../../src/core/formation/index.ts";
import { type HandoffInput, handOff } from "../../../src/core/handoff/index.ts";
import { proveRate } from "../../../src/core/handoff/prove-rate.ts";
import { compileLight } from "../../../src/core/light/index.ts";
import { sha256Hex } from "../../../src/core/maths/index.ts";
import { addCue, addFormation, applyEdit, createShow, type Show } from "../../../src/core/show/index.ts";
import { judgeFlightPaths } from "../../oracles/judge-flight-paths.ts";
import { readTable } from "../../oracles/read-flight-paths.ts";

/** Three drones, two formations, lit red from the start to the end. */
function makeShow(seconds: number): Show {
	return applyEdit(createShow(3, "Three"), (draft) => {
		const place = { position: [0, 40, 30] as [number, number, number] };
		addFormation(draft, { id: "low", shape: { kind: "ring", count: 3, radius: 4 }, place });
		addFormation(draft, { id: "wide", shape: { kind: "ring", count: 3, radius: 12 }, place });
		// Without beats the grid counts 120 a minute.
		addCue(draft, { kind: "transition", at: 10, length: 2 * seconds, formation: "wide" });
		addCue(draft, { kind: "colour", at: 0, paint: { kind: "flat", colour: "#ff0000" } });
		addCue(draft, { kind: "intensity", at: 0, level: 1 });
	}).show;
}

function fly(show: Show): HandoffInput {
	const slots = fleetSlotsOf(show);
	const { flight, check } = flyShow(show, slots, takeoffSlots(show));
	return {
		show,
		flight,
		check,
		care: careFor(show, slots, flight),
		light: compileLight(show, flight.stays, slots, []),
	};
}

/**
 * A drone that hovers, and one that flies round it on y = 1.5 − x²/3 and back: never nearer than 1.5 m, and that only
 * at the top of the bend, which lies half way between two rows of a tenth of a second.
 */
function roundTheCorner(): ShowFlight {
	const there = [
		[-2, 4, 0],
		[1 / 6, 16 / 3, -16 / 3],
		[30, 0, 0],
	];
	const back = [
		[2, -4, 0],
		[1 / 6, 16 / 3, -16 / 3],
		[30, 0, 0],
	];
	const hover = [0, 0, 0, 0, 0, 0, 30, 0, 0];
	const leg = (id: string, departs: number, path: readonly number[][]): Leg => ({
		id,
		departs,
		arrives: departs + 2,
		plan: {
			version: 1,
			target: Int32Array.of(0, 1),
			degree: 2,
			paths: Float64Array.from([...hover, ...path.flat()]),
			law: { kind: "s-curve", borders: Float64Array.of(0, 2), coefficients: Float64Array.of(0, 0.5, 0, 0, 0, 0) },
			shortest: 2,
			straightLineBound: 2,
			certificate: { optimal: true, cost: 0, bound: 0, cap: null },
			method: "made for a test",
		},
		rowOfDrone: Int32Array.of(0, 1),
		delays: null,
	});
	return {
		drones: 2,
		legs: [leg("there", 0.05, there), leg("back", 2.05, back)],
		stays: [],
		begins: 0.05,
		ends: 4.05,
		ground: Float64Array.of(0, 0, 30, -2, 1 / 6, 30),
	};
}

describe("the hand-off", () => {
	const input = fly(makeShow(8));
	const handed = handOff(input);

	it("leaves files that an oracle finds nothing in", () => {
		expect(input.check.flies).toBe(true);
		expect(handed.draft).toBe(false);
		const zip = handed.files.find(({ name }) => name === "flight-paths.zip");
		const files = unzipSync(zip?.bytes ?? new Uint8Array(0));
		const verdict = judgeFlightPaths(readTable(files, "positions", 10), input.show.fleet.limits);
		expect(verdict.broken).toEqual([]);
		expect(verdict.drones).toBe(3);
		const light = readTable(files, "light", 50);
		const at = (seconds: number): number[] => {
			const row = light.times.findIndex((time) => Math.abs(time - seconds) < 1e-9);
			return [...light.values.slice(row * 9, row * 9 + 3)];
		};
		expect(at(2)).toEqual([255, 0, 0]);
		expect(at(-1)).toEqual([0, 0, 0]);
	});

	it("describes the flight paths beside them and in them", () => {
		const json = handed.files.find(({ name }) => name === "flight-paths.json");
		const about = JSON.parse(strFromU8(json?.bytes ?? new Uint8Array(0)));
		expect(about).toMatchObject({
			revision: handed.revision,
			drones: 3,
			rates: { positions: 10, light: 50 },
			time: { motorsStart: input.flight.begins, lastDroneDown: input.flight.ends },
		});
		expect(about.files.filter(({ table }: { table: string }) => table === "light").length).toBeGreaterThanOrEqual(3);
	});

	it("gives the same bytes again", () => {
		const again = handOff(input);
		expect(again.files.map(({ name }) => name)).toEqual(handed.files.map(({ name }) => name));
		expect(again.files.map(({ bytes }) => sha256Hex(bytes))).toEqual(handed.files.map(({ bytes }) => sha256Hex(bytes)));
	});

	it("leaves nothing where the show can't be flown, and a draft only when asked", () => {
		const hasty = fly(makeShow(0.5));
		expect(hasty.check.flies).toBe(false);
		expect(handOff(hasty).files).toEqual([]);
		const draft = handOff(hasty, { draft: true });
		expect(draft.draft).toBe(true);
		expect(draft.files.map(({ name }) => name)).not.toContain("flight-paths.zip");
	});

	it("raises a rate at which straight flight between rows would break spacing, and says so", () => {
		const { show } = input;
		const proven = proveRate(show, roundTheCorner(), 10);
		// 2 m/s on a radius of 1.5 m: the chord of a tenth of a second cuts 3.3 mm, that of a twentieth 0.8 mm.
		expect(proven.rate).toBe(20);
		expect(proven.notes[0]).toMatch(/^Flight paths hold 20 rows a second instead of 10: /);
		expect(1.5 - proven.proof.gap).toBeCloseTo(0.0008, 4);
		expect(proveRate(show, roundTheCorner(), 20).notes).toEqual([]);
	});

	it("writes no flight paths that can't be proven at any rate, and says why", () => {
		const { show, flight } = input;
		const wide = { ...show, fleet: { ...show.fleet, limits: { ...show.fleet.limits, spacing: 5 } } };
		const proven = proveRate(wide, flight, 50);
		expect(proven.rate).toBeNull();
		expect(proven.notes[0]).toMatch(/^No flight paths are written: even at 100 rows a second drones \d and \d come to/);
		const withheld = handOff({ ...input, show: wide });
		expect(withheld.files).toEqual([]);
		expect(withheld.notes[0]).toMatch(/No flight paths are written/);
	});
});
