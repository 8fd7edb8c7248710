import { createHash } from "node:crypto";
import { readFileSync } from "node:fs";
import { unzipSync } from "fflate";
import { describe, expect, it } from "vitest";
import { careFor, flyShow } from "../../src/core/flight/index.ts";
import { fleetSlotsOf, takeoffSlots } from "../../src/core/formation/index.ts";
import { handOff } from "../../src/core/handoff/index.ts";
import { compileLight } from "../../src/core/light/index.ts";
import { readShow } from "../../src/core/show/index.ts";
import { judgeFlightPaths } from "../oracles/judge-flight-paths.ts";
import { readTable } from "../oracles/read-flight-paths.ts";

// The demo show as it is shipped, judged from the files that leave for the crew. The oracle imports nothing of src.
const folder = new URL("../../demo-tracks/", import.meta.url);
const show = readShow(readFileSync(new URL("lamps-for-the-returning-boats.starstave.json", folder), "utf8"));

describe("the demo show", () => {
	it("names its soundtrack by the right hash", () => {
		const bytes = readFileSync(new URL(show.soundtrack!.file, folder));
		expect(createHash("sha256").update(bytes).digest("hex")).toBe(show.soundtrack!.sha256);
	});

	it("has about 200 drones, a text, a drawing and all kinds of cues", () => {
		expect(Math.abs(show.fleet.count - 200)).toBeLessThan(20);
		const kinds = show.formations.order.map((id) => show.formations.byId[id].shape.kind);
		expect(kinds).toEqual(expect.arrayContaining(["text", "drawing"]));
		const cues = new Set(show.cues.order.map((id) => show.cues.byId[id].kind));
		expect([...cues].sort()).toEqual(["colour", "intensity", "transition"]);
	});

	it("flies by its own files: spacing and limits hold from the take-off grid and back to it", () => {
		const slots = fleetSlotsOf(show);
		const ground = takeoffSlots(show);
		const { flight, check } = flyShow(show, slots, ground);
		expect(check.flies).toBe(true);
		const { files } = handOff(
			{ show, flight, check, care: careFor(show, slots, flight), light: compileLight(show, flight.stays, slots, []) },
			{ lightRate: 10 },
		);
		const zip = files.find((file) => file.name === "flight-paths.zip")!;
		const tables = unzipSync(zip.bytes);
		const rate = JSON.parse(new TextDecoder().decode(tables["flight-paths.json"])).rates.positions as number;
		const table = readTable(tables, "positions", rate);
		const verdict = judgeFlightPaths(table, show.fleet.limits);
		expect(verdict.broken).toEqual([]);
		expect(verdict.drones).toBe(show.fleet.count);
		expect(verdict.gap).toBeGreaterThan(1.5 - 0.002);
		expect(verdict.home).toBeLessThan(1e-5);
		expect(verdict.startHeight).toBeLessThan(0.01);
		expect(verdict.endHeight).toBeLessThan(0.01);
		// Continuous through every hold: no row is further from the next than the fastest drone flies.
		const fastest = Math.hypot(6, 3) / rate + 1e-4;
		let jump = 0;
		for (let k = 0; k + 3 * verdict.drones < table.values.length; k += 3) {
			const [dx, dy, dz] = [0, 1, 2].map(
				(axis) => table.values[k + 3 * verdict.drones + axis] - table.values[k + axis],
			);
			jump = Math.max(jump, Math.hypot(dx, dy, dz));
		}
		expect(jump).toBeLessThan(fastest);
	});
});
