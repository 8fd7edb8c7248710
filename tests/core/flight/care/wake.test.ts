import { describe, expect, it } from "vitest";
import { countAbove, countUnder } from "../../../../src/core/flight/care/wake.ts";
import { careFor, flyShow, sayCare } from "../../../../src/core/flight/index.ts";
import { fleetSlotsOf, takeoffSlots } from "../../../../src/core/formation/index.ts";
import { applyEdit, changeFormation, readShow, type Show } from "../../../../src/core/show/index.ts";

const wake = { radius: 0.5, reach: 8 };

describe("standing in the wake of others", () => {
	it("counts those above within reach and footprint, on either side of the border of each", () => {
		const column = Float64Array.of(0, 0, 20, 0, 0, 23, 0, 0, 26, 0, 0, 29, 0.5, 0, 40, 0, 0, 32.0);
		// From the ground up: 3, 2, … above within 8 m; the one 0.5 m aside is in, 8 m up is in.
		expect([...countAbove(column, wake)]).toEqual([2, 2, 2, 1, 0, 1]);
		const aside = Float64Array.of(0, 0, 20, 0.51, 0, 23, 0.3, 0.41, 27);
		expect([...countAbove(aside, wake)]).toEqual([0, 1, 0]);
		const far = Float64Array.of(0, 0, 20, 0, 0, 28.001);
		expect(countUnder(countAbove(far, wake))).toBe(0);
		expect(countUnder(countAbove(far, { ...wake, reach: 8.0011 }))).toBe(1);
	});

	/** An upright wall of 5 columns and 4 rows, 2 m and 3.1 m apart, to which the fleet goes from a ring. */
	const text = JSON.stringify({
		format: "starstave-show",
		version: 1,
		title: "wall",
		grid: {
			beats: Array.from({ length: 80 }, (_, i) => i),
			bars: Array.from({ length: 20 }, (_, i) => ({ beat: 4 * i, beatsPerBar: 4 })),
		},
		fleet: { count: 20 },
		opening: "ring",
		formations: [
			{
				id: "ring",
				name: "ring",
				shape: { kind: "ring", count: 20, radius: 20 },
				place: { position: [0, 50, 50], tilt: 90 },
			},
			{
				id: "wall",
				name: "wall",
				shape: {
					kind: "points",
					points: Array.from({ length: 20 }, (_, i) => [2 * (i % 5), 0, 3.1 * Math.floor(i / 5)]),
				},
				place: { position: [0, 50, 30], turn: 30 },
				colours: Array.from({ length: 20 }, (_, i) => (i % 2 === 0 ? "#ff0000" : "#0000ff")),
				groups: { top: [15, 16, 17, 18, 19] },
			},
		],
		cues: [{ id: "c1", number: "7", kind: "transition", at: 10, length: 20, formation: "wall" }],
	});
	const show = readShow(text);
	const slots = fleetSlotsOf(show);
	const { flight } = flyShow(show, slots, takeoffSlots(show));
	const care = careFor(show, slots, flight);

	it("is told for each hold with how many and how long", () => {
		expect(care.wakeHolds).toHaveLength(1);
		const [hold] = care.wakeHolds;
		// All but the top row; the bottom two rows have two others within 8 m.
		expect(hold).toMatchObject({ formation: "wall", cue: "c1", drones: 15, from: 30, worst: { above: 2 } });
		const landing = flight.legs.find(({ id }) => id === "landing");
		expect(hold.to).toBe(landing?.departs);
		const topic = sayCare(show, care).find(({ id }) => id === "wake");
		expect(topic?.attention).toBe(true);
		expect(topic?.sentences[0]).toContain("In wall, after cue 7, 15 drones stand in the wake of others for");
	});

	it("has remedies which, when taken, do what they say: no pair left, spacing kept, colours and groups kept", () => {
		expect(care.wakeRemedies.map(({ kind }) => kind)).toEqual(["tilt", "offset-rows"]);
		for (const remedy of care.wakeRemedies) {
			const { show: changed } = applyEdit(show, (draft) => changeFormation(draft, remedy.formation, remedy.edit));
			const places = fleetSlotsOf(changed).get("wall")!;
			expect(countUnder(countAbove(places.all, changed.fleet.wake))).toBe(remedy.after);
			expect(remedy.after).toBe(0);
			expect(remedy.before).toBe(15);
			expect(gapByHand(places.all, changed)).toBeGreaterThanOrEqual(changed.fleet.limits.spacing - 0.002);
			expect(gapByHand(places.all, changed)).toBeCloseTo(remedy.gap, 9);
			expect([...places.colours!.slice(0, 6)]).toEqual([255, 0, 0, 0, 0, 255]);
			expect([...places.groups.get("top")!]).toEqual([15, 16, 17, 18, 19]);
		}
	});

	it("says what a tilt costs: the wall of three rises of 3.1 m is lower by 1 − cos 10° from the front", () => {
		const [remedy] = care.wakeRemedies;
		expect(remedy.cost).toContain(`${(100 * (1 - Math.cos(Math.PI / 18))).toFixed(1)} % lower`);
	});

	it("offers none that leaves the venue", () => {
		const thin: Show = { ...show, venue: { ...show.venue, volume: { min: [-100, 49, 0], max: [100, 51, 120] } } };
		const found = careFor(thin, slots, flight);
		expect(found.wakeHolds).toHaveLength(1);
		expect(found.wakeRemedies).toEqual([]);
	});

	it("offers none that breaks the spacing", () => {
		// The whole wall as dense as it may be: whatever parts the wakes must keep what it has.
		const dense: Show = {
			...show,
			fleet: { ...show.fleet, limits: { ...show.fleet.limits, spacing: 1.9 }, wake: { radius: 1.7, reach: 8 } },
		};
		const found = careFor(dense, slots, flight).wakeRemedies;
		expect(found.length).toBeGreaterThan(0);
		for (const { gap } of found) expect(gap).toBeGreaterThanOrEqual(1.9 - 0.002);
	});
});

/** Brute force over all pairs, in the measure of spacing. */
function gapByHand(places: Float64Array, { fleet }: Show): number {
	let least = Number.POSITIVE_INFINITY;
	for (let i = 0; i < places.length; i += 3) {
		for (let j = 0; j < i; j += 3) {
			const up = (places[i + 2] - places[j + 2]) / fleet.limits.downwash;
			least = Math.min(least, Math.hypot(places[i] - places[j], places[i + 1] - places[j + 1], up));
		}
	}
	return least;
}
