import { describe, expect, it } from "vitest";
import { applyRemedy, flyShow, type Remedy } from "../../../../src/core/flight/index.ts";
import { fleetSlotsOf, takeoffSlots } from "../../../../src/core/formation/index.ts";
import { applyEdit, changeCue, readShow, type Show } from "../../../../src/core/show/index.ts";

/** 16 drones, three discs 40 m apart in turn; beats every half second. */
function showOf(cues: object[]): Show {
	const disc = (id: string, x: number) => ({
		id,
		shape: { kind: "disc", count: 16, radius: 8 },
		place: { position: [x, 40, 40], tilt: 90 },
	});
	return readShow(
		JSON.stringify({
			format: "starstave-show",
			version: 1,
			fleet: { count: 16 },
			grid: {
				beats: Array.from({ length: 241 }, (_, i) => i * 0.5),
				bars: Array.from({ length: 60 }, (_, i) => ({ beat: 4 * i, beatsPerBar: 4 })),
			},
			opening: "a",
			formations: [disc("a", -20), disc("b", 20), disc("c", -20)],
			cues: cues.map((cue, i) => ({ id: `c${i + 1}`, number: String(i + 1), kind: "transition", ...cue })),
		}),
	);
}
const check = (show: Show) => flyShow(show, fleetSlotsOf(show), takeoffSlots(show)).check;

const applied = (show: Show, remedy: Pick<Remedy, "steps">): Show =>
	applyEdit(show, (draft) => applyRemedy(draft, remedy)).show;
const changeOf = (remedy: Remedy) => {
	const [step] = remedy.steps;
	if (step.do !== "change-cue") throw new Error("a remedy in time changes a cue");
	return step.change;
};

describe("remedies of a transition that is too fast", () => {
	const show = showOf([
		{ at: 60, length: 8, formation: "b" },
		{ at: 100, length: 40, formation: "c" },
	]);
	const before = check(show);
	const remedies = before.transitions[0].remedies;

	it("are there for it, and none for one that flies", () => {
		expect(before.transitions[0].verdicts).toContain("too-fast");
		expect(remedies.map(({ kind }) => kind)).toEqual(["depart-earlier", "arrive-later"]);
		expect(before.transitions[1].remedies).toEqual([]);
	});

	it("make it fly when they are applied, and a beat less would not", () => {
		for (const remedy of remedies) {
			expect(check(applied(show, remedy)).transitions[0].verdicts).toContain("flies");
			const change = changeOf(remedy);
			const length = (change.length ?? 0) - 1;
			const at = change.at === 60 ? 60 : change.at! + 1;
			const less = applyEdit(show, (draft) => changeCue(draft, "c1", { at, length })).show;
			expect(check(less).transitions[0].verdicts).toContain("too-fast");
		}
	});

	it("move both ends where neither alone has the time", () => {
		const cramped = showOf([
			{ at: 40, length: 30, formation: "b" },
			{ at: 76, length: 8, formation: "c" },
			{ at: 90, length: 40, formation: "b" },
		]);
		const kinds = check(cramped).transitions[1].remedies.map(({ kind }) => kind);
		expect(kinds).toEqual(["depart-and-arrive"]);
		const [remedy] = check(cramped).transitions[1].remedies;
		expect(check(applied(cramped, remedy)).transitions.map(({ verdicts }) => verdicts.includes("flies"))).toEqual([
			true,
			true,
			true,
		]);
	});

	it("offer the S-curve where minimum jerk is too slow for the time there is", () => {
		const slow = showOf([{ at: 60, length: 20, formation: "b", timeLaw: "minimum-jerk" }]);
		const needed = check(slow).transitions[0].needed!;
		const fast = check(showOf([{ at: 60, length: 20, formation: "b" }])).transitions[0].needed!;
		expect(fast).toBeLessThan(needed);
		const between = showOf([{ at: 60, length: needed + fast, formation: "b", timeLaw: "minimum-jerk" }]);
		const answer = check(between).transitions[0];
		expect(answer.remedies[0]?.kind).toBe("time-law");
		expect(check(applied(between, answer.remedies[0])).transitions[0].verdicts).toContain("flies");
	});
});
