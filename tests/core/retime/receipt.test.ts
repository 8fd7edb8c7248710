import { describe, expect, test } from "vitest";
import { compareTransitions, retimeShow } from "../../../src/core/retime/index.ts";
import { makeMap, makeShow, soundtrack, transition } from "./made-maps.ts";

const cues = [
	transition("c1", 8, 8, "B"),
	transition("c2", 40, 8, "C"),
	transition("c3", 76, 8, "D"),
	transition("c4", 100, 8, "A"),
];

describe("the receipt of plans", () => {
	test("a show against itself: everything is the same", () => {
		const show = makeShow(cues);
		const receipt = compareTransitions(show, show);
		expect(receipt.transitions.map(({ status }) => status)).toEqual(["same", "same", "same", "same"]);
		expect(receipt).toMatchObject({ gone: [], launch: "same", landing: "same" });
		expect(receipt.transitions.map(({ from, to }) => [from, to])).toEqual([
			["A", "B"],
			["B", "C"],
			["C", "D"],
			["D", "A"],
		]);
	});

	test("after a new intro every transition is only shifted: same paths in the same time", () => {
		const show = makeShow(cues);
		const next = retimeShow(show, makeMap(60, 67, [[0, 60, 7, 67]]), soundtrack(67)).show;
		expect(compareTransitions(show, next).transitions.every(({ status }) => status === "same")).toBe(true);
	});

	test("at another tempo every transition is dilated, with both durations", () => {
		const show = makeShow(cues);
		const next = retimeShow(show, makeMap(60, 57, [[0, 60, 0, 57]]), soundtrack(57)).show;
		const { transitions } = compareTransitions(show, next);
		for (const { status, oldDuration, newDuration } of transitions) {
			expect(status).toBe("dilated");
			expect(newDuration / (oldDuration as number)).toBeCloseTo(0.95, 6);
		}
	});

	test("where a transition was cut, the one after it starts elsewhere and is new geometry", () => {
		const show = makeShow(cues);
		const map = makeMap(60, 44, [
			[0, 16, 0, 16],
			[32, 60, 16, 44],
		]);
		const receipt = compareTransitions(show, retimeShow(show, map, soundtrack(44)).show);
		expect(receipt.gone).toEqual(["c2"]);
		expect(receipt.transitions.map(({ cue, from, status }) => [cue, from, status])).toEqual([
			["c1", "A", "same"],
			["c3", "B", "changed"],
			["c4", "D", "same"],
		]);
	});

	test("another limit, fleet, formation or time law changes what hangs on it and nothing else", () => {
		const show = makeShow(cues);
		const limits = { ...show, fleet: { ...show.fleet, limits: { ...show.fleet.limits, spacing: 2 } } };
		expect(compareTransitions(show, limits).transitions.every(({ status }) => status === "changed")).toBe(true);
		expect(compareTransitions(show, limits).launch).toBe("changed");
		const { B } = show.formations.byId;
		const moved = {
			...show,
			formations: {
				...show.formations,
				byId: { ...show.formations.byId, B: { ...B, place: { ...B.place, turn: 30 } } },
			},
		};
		expect(compareTransitions(show, moved).transitions.map(({ status }) => status)).toEqual([
			"changed",
			"changed",
			"same",
			"same",
		]);
		expect(compareTransitions(show, moved)).toMatchObject({ launch: "same", landing: "same" });
		const law = { ...show.cues.byId.c3, timeLaw: "minimum-jerk" as const };
		const other = { ...show, cues: { ...show.cues, byId: { ...show.cues.byId, c3: law } } } as typeof show;
		expect(compareTransitions(show, other).transitions.map(({ status }) => status)).toEqual([
			"same",
			"same",
			"changed",
			"same",
		]);
	});
});
