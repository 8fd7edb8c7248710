import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
	mendedFormation,
	REMEDY_SEARCHES,
	type Remedy,
	type ShowCheck,
	searchRemedies,
} from "../../../../src/core/flight/index.ts";
import { fleetSlotsOf } from "../../../../src/core/formation/index.ts";
import type { Show } from "../../../../src/core/show/index.ts";
import { applied, fly, smallShow } from "./small-show.ts";

/** Nine drones, three formations anywhere in a small venue, with a block in it or none, and as much time as chance has. */
const shows = fc
	.record({
		formations: fc.array(
			fc.record({
				kind: fc.constantFrom("ring", "disc", "sphere"),
				radius: fc.integer({ min: 2, max: 20 }),
				x: fc.integer({ min: -45, max: 45 }),
				z: fc.integer({ min: 15, max: 75 }),
				tilt: fc.constantFrom(0, 90),
				count: fc.constantFrom(9, 9, 7),
			}),
			{ minLength: 3, maxLength: 3 },
		),
		lengths: fc.array(fc.integer({ min: 4, max: 30 }), { minLength: 2, maxLength: 2 }),
		blocked: fc.boolean(),
		timeLaw: fc.constantFrom("s-curve", "minimum-jerk"),
	})
	.map(({ formations, lengths, blocked, timeLaw }) =>
		smallShow(
			9,
			formations.map(({ kind, radius, x, z, tilt, count }, i) => ({
				id: "abc"[i],
				shape: { kind, radius, count },
				place: { position: [x, 50, z], tilt },
			})),
			lengths.map((length, i) => ({ at: 60 + 60 * i, length, formation: "bc"[i], timeLaw })),
			{
				volume: { min: [-70, 0, 0], max: [70, 100, 100] },
				blocked: blocked ? [{ min: [-6, 30, 0], max: [6, 70, 50] }] : [],
			},
		),
	);

const legsOf = ({ launch, landing, transitions }: ShowCheck) => [launch!, ...transitions, landing!];
const flying = (check: ShowCheck): string[] =>
	legsOf(check).flatMap(({ id, verdicts }) => (verdicts.includes("flies") ? [id] : []));

/** What was asked for flies, and so does everything that flew, when it is all planned and proven from nothing. */
function expectToHold(show: Show, before: ShowCheck, id: string, remedy: Remedy): void {
	const after = fly(applied(show, remedy)).check;
	const now = flying(after);
	expect(now, remedy.change).toContain(id);
	for (const one of flying(before)) expect(now, `${one} after: ${remedy.change}`).toContain(one);
	expect(remedy.cost, remedy.change).not.toBe("");
	expect(remedy.loss).toBeGreaterThanOrEqual(0);
}

describe("a remedy that is offered", () => {
	it("always flies when it is applied, and breaks nothing that flew", () => {
		const kinds = new Set<string>();
		fc.assert(
			fc.property(shows, (show) => {
				const { check, flight } = fly(show);
				const slots = fleetSlotsOf(show);
				for (const { id, verdicts, remedies } of check.transitions) {
					if (verdicts.includes("flies")) continue;
					const found = REMEDY_SEARCHES.flatMap((search) => searchRemedies(show, slots, flight, check, id, search));
					for (const remedy of [...remedies, ...found.map((one) => one.remedy)]) {
						kinds.add(remedy.kind);
						expectToHold(show, check, id, remedy);
					}
				}
				for (const { id, verdicts } of check.formations) {
					if (verdicts.includes("flies")) continue;
					for (const { remedy } of mendedFormation(show, slots, flight, check, id)) {
						kinds.add(remedy.kind);
						const after = fly(applied(show, remedy)).check;
						expect(after.formations.find((one) => one.id === id)!.verdicts, remedy.change).toContain("flies");
						if (remedy.cost.includes("no longer flies")) continue;
						for (const one of flying(check)) expect(flying(after), `${one} after: ${remedy.change}`).toContain(one);
					}
				}
			}),
			{ numRuns: 15, seed: 7 },
		);
		// The shows are such that many kinds are needed somewhere.
		expect(kinds.size).toBeGreaterThanOrEqual(6);
	});
});
