import { describe, expect, it } from "vitest";
import { moveLegs } from "../../src/app/move-legs.ts";
import { redateCheck } from "../../src/app/redate-check.ts";
import { assembleFlight, checkShow, flyShow } from "../../src/core/flight/index.ts";
import { fleetSlotsOf, takeoffSlots } from "../../src/core/formation/index.ts";
import { applyEdit, changeCue, readShow, type Show } from "../../src/core/show/index.ts";
import { sampleFile } from "../core/show/sample-show.ts";

/** Three transitions among two formations, the last of them late. */
function makeShow(): Show {
	const file = sampleFile();
	const third = { id: "c6", number: "20", kind: "transition", at: 44, length: 10, formation: "f1" };
	const fourth = { id: "c7", number: "21", kind: "transition", at: 60, length: 16, formation: "f2" };
	return readShow(JSON.stringify({ ...file, cues: [...file.cues, third, fourth] }));
}

const show = makeShow();
const slots = fleetSlotsOf(show);
const ground = takeoffSlots(show);
const flown = flyShow(show, slots, ground);

const edits: [string, Parameters<typeof changeCue>[2]][] = [
	["shorter", { length: 6 }],
	["far too short", { length: 0.5 }],
	["departing earlier", { at: 18, length: 14 }],
	["before the music", { at: -20, length: 30 }],
	["into the next one, which is held up", { length: 30 }],
	["pinned", { pinned: 9.9 }],
];

describe("a cue moved in time, held against the flight assembled and proven anew", () => {
	it.each(edits)("%s", (_name, change) => {
		const moved = applyEdit(show, (draft) => changeCue(draft, "c3", change)).show;
		const flight = moveLegs(flown.flight, show, moved);
		const anew = assembleFlight(moved, slots, ground, flown.plans);
		expect(flight.begins).toBeCloseTo(anew.begins, 9);
		expect(flight.ends).toBeCloseTo(anew.ends, 9);
		flight.legs.forEach((leg, index) => {
			expect(leg.departs).toBeCloseTo(anew.legs[index].departs, 9);
			expect(leg.arrives).toBeCloseTo(anew.legs[index].arrives, 9);
			expect({ ...leg, departs: 0, arrives: 0 }).toEqual({ ...anew.legs[index], departs: 0, arrives: 0 });
		});
		flight.stays.forEach((stay, index) => {
			const { arrives, departs } = anew.stays[index];
			expect(Math.abs(stay.arrives - arrives) < 1e-9 || stay.arrives === arrives).toBe(true);
			expect(Math.abs(stay.departs - departs) < 1e-9 || stay.departs === departs).toBe(true);
		});

		const check = redateCheck(flown.check, moved, flight);
		const proven = checkShow(moved, slots, anew, flown.plans);
		check.transitions.forEach((transition, index) => {
			const { remedies: _a, peak, gap, ...rest } = transition;
			const { remedies: _b, peak: provenPeak, gap: provenGap, ...provenRest } = proven.transitions[index];
			expect(rest.verdicts).toEqual(provenRest.verdicts);
			expect(rest.needed).toEqual(provenRest.needed);
			expect(rest.available).toBeCloseTo(provenRest.available, 9);
			expect(rest.departs.beat).toBeCloseTo(provenRest.departs.beat!, 9);
			expect(rest.arrives.beat).toBeCloseTo(provenRest.arrives.beat!, 9);
			if (rest.slackBeats !== null) expect(rest.slackBeats).toBeCloseTo(provenRest.slackBeats!, 9);
			for (const name of Object.keys(peak) as (keyof typeof peak)[]) {
				expect(Math.abs(peak[name] / provenPeak[name] - 1) < 1e-9 || peak[name] === provenPeak[name]).toBe(true);
			}
			expect(gap!.distance).toBe(provenGap!.distance);
			expect(gap!.drones).toEqual(provenGap!.drones);
			expect(gap!.time).toBeCloseTo(provenGap!.time, 9);
		});
	});

	it("is the very same flight where nothing has moved", () => {
		expect(moveLegs(flown.flight, show, show)).toBe(flown.flight);
	});
});
