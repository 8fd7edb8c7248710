import { describe, expect, it } from "vitest";
import {
	REMEDY_SEARCHES,
	type Remedy,
	type RemedySearch,
	type ShowCheck,
	searchRemedies,
} from "../../../../src/core/flight/index.ts";
import { fleetSlotsOf } from "../../../../src/core/formation/index.ts";
import type { Show } from "../../../../src/core/show/index.ts";
import { applied, fly, smallShow } from "./small-show.ts";

const disc = (id: string, x: number, radius = 8, count = 16) => ({
	id,
	shape: { kind: "disc", count, radius },
	place: { position: [x, 40, 40], tilt: 90 },
});
const line = (id: string, turn: number, x = 0) => ({
	id,
	shape: { kind: "line", count: 16, length: 60 },
	place: { position: [x, 50, 40], turn },
});
const dense = (id: string, x: number, turn: number) => ({
	id,
	shape: { kind: "grid", columns: 4, rows: 4, layers: 1, pitch: 1.502 },
	place: { position: [x, 50, 40], turn },
});

const legsOf = ({ launch, landing, transitions }: ShowCheck) => [launch!, ...transitions, landing!];

interface Answer {
	readonly remedies: readonly Remedy[];
	/** Ids of transitions that flew before. */
	readonly flew: readonly string[];
}

function search(show: Show, id: string, kinds: readonly RemedySearch[] = REMEDY_SEARCHES): Answer {
	const flown = fly(show);
	const { check, flight } = flown;
	const slots = fleetSlotsOf(show);
	return {
		remedies: kinds.flatMap((kind) => searchRemedies(show, slots, flight, check, id, kind).map(({ remedy }) => remedy)),
		flew: legsOf(check).flatMap((leg) => (leg.verdicts.includes("flies") ? [leg.id] : [])),
	};
}

/** Applied to the show and proven from scratch: what was asked for flies, and so does all that flew. */
function expectToFly(show: Show, id: string, { remedies, flew }: Answer): void {
	for (const remedy of remedies) {
		const after = fly(applied(show, remedy)).check;
		for (const one of [id, ...flew]) {
			const leg = legsOf(after).find((other) => other.id === one)!;
			expect(leg.verdicts, `${one} after: ${remedy.change}`).toContain("flies");
		}
	}
}

describe("remedies in space", () => {
	it("bring a far picture nearer, either one, and shrink a wide one, no further than its spacing", () => {
		const show = smallShow(
			16,
			[disc("a", -20), disc("b", 20), disc("c", -20)],
			[
				{ at: 60, length: 16, formation: "b" },
				{ at: 100, length: 40, formation: "c" },
			],
		);
		const answer = search(show, "c1");
		expect(answer.flew).toEqual(["launch", "c2", "landing"]);
		const kinds = answer.remedies.map(({ kind }) => kind);
		expect(kinds).toContain("nearer-to");
		expect(kinds).toContain("nearer-from");
		expectToFly(show, "c1", answer);
		const wide = smallShow(16, [disc("a", 0, 5), disc("b", 0, 40)], [{ at: 60, length: 15, formation: "b" }]);
		const shrunk = search(wide, "c1", ["shrink"]);
		expect(shrunk.remedies.map(({ kind }) => kind)).toEqual(["shrink-to"]);
		expectToFly(wide, "c1", shrunk);
	});

	it("turn a picture that stands across", () => {
		const show = smallShow(16, [line("a", 0), line("b", 70)], [{ at: 60, length: 12, formation: "b" }]);
		const answer = search(show, "c1", ["turn"]);
		expect(answer.remedies.map(({ kind }) => kind)).toContain("turn-to");
		expect(answer.remedies[0].change).toMatch(/^Turn b by \d+° about the upright, clockwise/);
		expectToFly(show, "c1", answer);
	});

	it("copy a formation that is shown elsewhere too, and leave that one alone", () => {
		const show = smallShow(
			16,
			[disc("a", -20), disc("b", 20)],
			[
				{ at: 60, length: 16, formation: "b" },
				{ at: 100, length: 40, formation: "a" },
				{ at: 160, length: 40, formation: "b" },
			],
		);
		const answer = search(show, "c1", ["nearer"]);
		const remedy = answer.remedies.find(({ kind }) => kind === "nearer-to")!;
		expect(remedy.cost).toContain("A copy is made");
		const after = applied(show, remedy);
		expect(after.formations.order).toHaveLength(3);
		expect(after.formations.byId.b).toBe(show.formations.byId.b);
		expect(after.cues.byId.c3).toBe(show.cues.byId.c3);
		expectToFly(show, "c1", answer);
	});

	it("spread dense pictures whose flights have to bend", () => {
		const show = smallShow(16, [dense("a", 0, 0), dense("b", 0, 40)], [{ at: 60, length: 40, formation: "b" }]);
		const { needed, straightLineBound } = fly(show).check.transitions[0];
		expect(needed!).toBeGreaterThan(1.05 * straightLineBound);
		const length = 2 * (0.5 * needed! + 0.5 * straightLineBound);
		const short = smallShow(16, [dense("a", 0, 0), dense("b", 0, 40)], [{ at: 60, length, formation: "b" }]);
		const answer = search(short, "c1");
		expect(answer.remedies.length).toBeGreaterThan(0);
		expectToFly(short, "c1", answer);
	});

	it("fly over or round what is blocked", () => {
		const blocked = [{ min: [-5, 0, 0], max: [5, 100, 60] }];
		const show = smallShow(16, [disc("a", -30), disc("b", 30)], [{ at: 60, length: 40, formation: "b" }], { blocked });
		expect(fly(show).check.transitions[0].verdicts).toContain("out-of-venue");
		const answer = search(show, "c1", ["way"]);
		expect(answer.remedies.map(({ kind }) => kind)).toEqual(["waypoint"]);
		expect(answer.remedies[0].change).toMatch(/^Fly over what is blocked in \d transitions/);
		expectToFly(show, "c1", answer);
	});

	it("change the picture and the times together where neither alone is enough", () => {
		// The holds on either side give too little, and no picture can come near enough in 4 beats.
		const cues = [
			{ at: 20, length: 36, formation: "b" },
			{ at: 58, length: 4, formation: "c" },
			{ at: 68, length: 40, formation: "d" },
		];
		const formations = [disc("a", -30), disc("b", -30, 9), disc("c", 30), disc("d", 30, 9)];
		const show = smallShow(16, formations, cues);
		const { needed, remedies } = fly(show).check.transitions[1];
		expect(needed!).toBeGreaterThan(5);
		expect(remedies).toEqual([]);
		const answer = search(show, "c2");
		expect(answer.remedies.length).toBeGreaterThan(0);
		expect(answer.remedies[0].change).toMatch(/m nearer to b\. Depart 2 beats earlier/);
		expectToFly(show, "c2", answer);
	});

	it("offer nothing for a transition that flies, nor where the music leaves no time at all", () => {
		const flying = smallShow(16, [disc("a", -20), disc("b", 20)], [{ at: 60, length: 60, formation: "b" }]);
		expect(search(flying, "c1").remedies).toEqual([]);
		const hopeless = smallShow(16, [disc("a", -90), disc("b", 90)], [{ at: 60, length: 0.5, formation: "b" }]);
		expectToFly(hopeless, "c1", search(hopeless, "c1"));
	});
});
