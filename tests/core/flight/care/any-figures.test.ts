import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { careFor, flyShow, sayCare } from "../../../../src/core/flight/index.ts";
import { fleetSlotsOf, takeoffSlots } from "../../../../src/core/formation/index.ts";
import { readShow, type Show } from "../../../../src/core/show/index.ts";

/** Eight drones from a ring to an upright block and back, planned once. */
const show = readShow(
	JSON.stringify({
		format: "starstave-show",
		version: 1,
		title: "any figures",
		fleet: { count: 8 },
		opening: "ring",
		formations: [
			{ id: "ring", shape: { kind: "ring", count: 8, radius: 10 }, place: { position: [0, 40, 40] } },
			{
				id: "block",
				shape: { kind: "points", points: Array.from({ length: 8 }, (_, i) => [2 * (i % 2), 0, 3.1 * (i >> 1)]) },
				place: { position: [10, 60, 60] },
			},
		],
		cues: [
			{ id: "c1", number: "1", kind: "transition", at: 10, length: 40, formation: "block" },
			{ id: "c2", number: "2", kind: "transition", at: 60, length: 40, formation: "ring" },
		],
	}),
);
const slots = fleetSlotsOf(show);
const { flight } = flyShow(show, slots, takeoffSlots(show));

function everyNumber(value: unknown, path: string, visit: (number: number, path: string) => void): void {
	if (typeof value === "number") visit(value, path);
	else if (value !== null && typeof value === "object") {
		for (const [key, inner] of Object.entries(value)) everyNumber(inner, `${path}.${key}`, visit);
	}
}

describe("care, whatever the figures of fleet and venue that the schema takes", () => {
	it("is finite in every figure, and said in sentences without holes", () => {
		const between = (min: number, max: number) => fc.double({ min, max, noNaN: true });
		const figures = fc.record({
			wind: between(0, 60),
			gust: between(0, 60),
			terminalSpeed: between(1, 200),
			mass: between(0.001, 1000),
			positionError: between(0, 100),
			tracking: fc.record({
				frequency: between(0.05, 10),
				damping: between(0.1, 5),
				recovery: between(0.1, 1000),
				delay: between(0, 2),
				spread: between(0, 0.5),
			}),
			wake: fc.record({ radius: between(0, 100), reach: between(0, 200) }),
		});
		fc.assert(
			fc.property(figures, ({ wind, gust, terminalSpeed, mass, positionError, tracking, wake }) => {
				const other: Show = {
					...show,
					fleet: { ...show.fleet, terminalSpeed, mass, positionError, tracking, wake },
					venue: { ...show.venue, wind, gust, audience: { from: [-50, -20], to: [50, -20] } },
				};
				const care = careFor(other, slots, flight);
				everyNumber(care, "care", (number, path) => expect(Number.isFinite(number), path).toBe(true));
				for (const { sentences, assumptions } of sayCare(other, care)) {
					for (const sentence of [...sentences, ...assumptions])
						expect(sentence).not.toMatch(/NaN|Infinity|undefined|null/);
				}
			}),
			{ numRuns: 25, seed: 7 },
		);
	});

	it("has little to say of a fleet that does not fly", () => {
		const empty: Show = { ...show, fleet: { ...show.fleet, count: 0 } };
		const grounded = { drones: 0, legs: [], stays: [], begins: 0, ends: 0, ground: new Float64Array(0) };
		const care = careFor(empty, new Map(), grounded);
		expect(care).toMatchObject({ fallZone: null, wakeHolds: [], wakeRemedies: [], airtime: null });
		expect(care.asFlown.legs).toEqual([]);
		expect(sayCare(empty, care).every(({ attention }) => !attention)).toBe(true);
	});
});
