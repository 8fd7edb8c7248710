import { describe, expect, it } from "vitest";
import { type Remedy, type ShowCheck, searchRemedies } from "../../../../src/core/flight/index.ts";
import { fleetSlotsOf } from "../../../../src/core/formation/index.ts";
import type { Show, TransitionCue } from "../../../../src/core/show/index.ts";
import { applied, fly, smallShow } from "./small-show.ts";

const grid = (id: string, x: number, pitch: number, more: object = {}) => ({
	id,
	name: id,
	shape: { kind: "grid", columns: 4, rows: 4, layers: 1, pitch },
	place: { position: [x, 50, 40] },
	...more,
});
const cues = [
	{ at: 60, length: 60, formation: "b", light: "dim", timeLaw: "minimum-jerk" },
	{ at: 140, length: 60, formation: "a" },
];

/** As if no plan in one flight had been found for the first cue: what the planner can't part is hard to come by. */
function unparted(check: ShowCheck): ShowCheck {
	const transitions = check.transitions.map((one) =>
		one.id === "c1" ? { ...one, needed: null, verdicts: ["too-close" as const] } : one,
	);
	return { ...check, transitions };
}

function byWay(show: Show): Remedy {
	const { check, flight } = fly(show);
	return searchRemedies(show, fleetSlotsOf(show), flight, unparted(check), "c1", "way")[0].remedy;
}

const flies = (show: Show): boolean => fly(show).check.flies;

describe("a transition in parts", () => {
	it("goes by way of a picture drawn apart to √2 times the spacing, where straight flights pass", () => {
		const show = smallShow(16, [grid("a", -8, 1.502), grid("b", 8, 1.502)], cues);
		const remedy = byWay(show);
		expect(remedy.kind).toBe("waypoint");
		expect(remedy.change).toMatch(/^Fly in two transitions, by way of b drawn apart to 142 %\./);
		const after = applied(show, remedy);
		expect(flies(after)).toBe(true);
		expect(after.cues.order).toHaveLength(3);
		expect(after.formations.byId.a).toBe(show.formations.byId.a);
	});

	it("lets half of the fleet go first where the pictures are wide already: some slots of either on the way", () => {
		const colours = Array.from({ length: 16 }, (_, i) => `#0000${(16 * i).toString(16).padStart(2, "0")}`);
		const show = smallShow(16, [grid("a", -20, 3, { colours }), grid("b", 20, 3)], cues);
		const remedy = byWay(show);
		expect(remedy.kind).toBe("part-first");
		expect(remedy.change).toMatch(/^Let 8 drones go first and the other 8 follow, in two transitions\./);
		const after = applied(show, remedy);
		expect(flies(after)).toBe(true);
		const added = after.cues.order
			.filter((id) => !show.cues.order.includes(id))
			.map((id) => after.cues.byId[id] as TransitionCue);
		expect(added).toHaveLength(1);
		// On the way as the cue itself goes, and the cue still is the one that arrives.
		expect(added[0]).toMatchObject({ light: "dim", timeLaw: "minimum-jerk", at: 60 });
		const cue = after.cues.byId.c1;
		expect(cue).toMatchObject({ number: "1", formation: "b" });
		expect(cue.at).toBeCloseTo(added[0].at + added[0].length, 9);
		expect(cue.at + cue.length).toBeCloseTo(120, 9);
		// Half of the slots are those of the one picture, half those of the other.
		const half = fleetSlotsOf(after).get(added[0].formation)!;
		const xs = Array.from({ length: 16 }, (_, i) => half.positions[3 * i]);
		expect(xs.filter((x) => x < 0)).toHaveLength(8);
		expect(after.formations.byId[added[0].formation].colours).toEqual(colours);
	});

	it("is not offered where a dark drone would be taken for a lit one", () => {
		const b = { ...grid("b", 20, 3), shape: { kind: "grid", columns: 4, rows: 3, layers: 1, pitch: 3 } };
		const show = smallShow(16, [grid("a", -20, 3), b], cues);
		const { check, flight } = fly(show);
		expect(searchRemedies(show, fleetSlotsOf(show), flight, unparted(check), "c1", "way")).toEqual([]);
	});

	it("is not offered where the holds have no time for it", () => {
		const short = [
			{ at: 60, length: 16, formation: "b" },
			{ at: 77, length: 60, formation: "a" },
		];
		const show = smallShow(
			16,
			[grid("a", -20, 3), grid("b", 20, 3), grid("z", -20, 3.2)],
			[{ at: 20, length: 39, formation: "z" }, ...short],
		);
		const { check, flight } = fly(show);
		const hard = {
			...check,
			transitions: check.transitions.map((one) =>
				one.id === "c2" ? { ...one, needed: null, verdicts: ["too-close" as const] } : one,
			),
		};
		expect(searchRemedies(show, fleetSlotsOf(show), flight, hard, "c2", "way")).toEqual([]);
	});
});
