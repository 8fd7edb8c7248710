import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { proveRows } from "../../../src/core/handoff/prove-rows.ts";
import { createShow } from "../../../src/core/show/index.ts";
import { judgeFlightPaths } from "../../oracles/judge-flight-paths.ts";

const { limits } = createShow(1).fleet;
const far = Float64Array.from([0, 0, 0, 100, 0, 0]);

/** A fleet by a formula, ten rows a second. */
function prove(drones: number, rows: number, place: (t: number, i: number) => readonly number[], ground = far) {
	return proveRows(
		{
			drones,
			rate: 10,
			first: 0,
			last: rows - 1,
			ground,
			positionsAt(t, out) {
				for (let i = 0; i < drones; i++) out.set(place(t, i), 3 * i);
			},
		},
		limits,
	);
}

describe("the proof of the rows that leave", () => {
	it("finds what comes too close between two rows, in closed form", () => {
		const proof = prove(2, 3, (t, i) => [(i === 0 ? -1 : 1) * (0.8 - 16 * t), 0.3 * i, 50]);
		expect(proof.gap).toBeCloseTo(0.3, 9);
		expect(proof.at?.seconds).toBeCloseTo(0.05, 9);
		expect(proof.broken.join()).toMatch(/drones 1 and 2 come to 0\.3000 m at 0\.05 s, under 1\.5 m/);
	});

	it("sees the chord: on a circle about each other two drones cut the corner by a·Δt²/8 each", () => {
		// Radius 0.75 m at 1.5 m/s: 3 m/s² towards the middle, so 3.75 mm each, 7.5 mm the pair (flown at 10 Hz).
		const proof = prove(2, 50, (t, i) => [
			(i === 0 ? 0.75 : -0.75) * Math.cos(2 * t),
			(i === 0 ? 0.75 : -0.75) * Math.sin(2 * t),
			50,
		]);
		expect(1.5 - proof.gap).toBeCloseTo(0.0075, 4);
		expect(proof.broken.length).toBe(1);
	});

	it("holds a pair to the grid's pitch for as long as one of the two is below 1 m, and to spacing from there on", () => {
		const ground = Float64Array.from([0, 0, 0, 0.8, 0, 0]);
		const rise = (t: number, i: number): readonly number[] => [0.8 * i, 0, i === 0 ? 2.9 * t : 0];
		expect(prove(2, 30, rise, ground).broken).toEqual([]);
		const both = prove(2, 30, (t, i) => [0.8 * i, 0, 2.9 * t], ground);
		expect(both.broken[0]).toMatch(/come to 0\.8000 m/);
		const squeeze = prove(2, 30, (t, i) => [(0.8 - 0.05 * t) * i, 0, 0], ground);
		expect(squeeze.broken[0]).toMatch(/under the grid's pitch of 0\.800 m/);
	});

	it("finds speeds over their limits", () => {
		expect(prove(1, 5, (t) => [6.01 * t, 0, 20]).broken[0]).toMatch(/horizontal speed reaches 6\.010/);
		expect(prove(1, 5, (t) => [0, 0, 20 + 3.01 * t]).broken[0]).toMatch(/climb/);
		expect(prove(1, 5, (t) => [0, 0, 20 - 2.01 * t]).broken[0]).toMatch(/descent/);
		expect(prove(1, 5, (t) => [4.2 * t, 4.2 * t, 20 - 2 * t]).broken).toEqual([]);
	});

	it("agrees with the oracle, which shares no code with it, on random flights", () => {
		const drones = 5;
		const value = fc.double({ min: -3, max: 3, noNaN: true });
		const knots = fc.array(fc.array(value, { minLength: 15, maxLength: 15 }), { minLength: 4, maxLength: 4 });
		fc.assert(
			fc.property(knots, fc.double({ min: 0, max: 6, noNaN: true }), (places, height) => {
				const place = (t: number, i: number): readonly number[] => {
					const row = Math.min(3, Math.round(t * 10));
					const [x, y, z] = places[row].slice(3 * i, 3 * i + 3);
					return [x, y, z + height].map((v) => Math.round(v * 1e6) / 1e6);
				};
				const proof = prove(drones, 4, place);
				const values = new Float64Array(4 * drones * 3);
				for (let row = 0; row < 4; row++) {
					for (let i = 0; i < drones; i++) values.set(place(row / 10, i), (row * drones + i) * 3);
				}
				const times = Float64Array.from([0, 0.1, 0.2, 0.3]);
				const judged = judgeFlightPaths({ drones, times, values }, limits);
				expect(proof.horizontal).toBeCloseTo(judged.horizontal, 6);
				if (judged.gap < limits.spacing) expect(proof.gap).toBeCloseTo(judged.gap, 9);
				else expect(proof.gap).toBeGreaterThanOrEqual(limits.spacing);
				if (judged.groundGap < limits.spacing) expect(proof.groundGap).toBeCloseTo(judged.groundGap, 9);
			}),
		);
	});
});
