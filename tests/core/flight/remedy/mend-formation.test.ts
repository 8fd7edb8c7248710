import { describe, expect, it } from "vitest";
import { mendedFormation } from "../../../../src/core/flight/index.ts";
import { fleetSlotsOf } from "../../../../src/core/formation/index.ts";
import type { Show } from "../../../../src/core/show/index.ts";
import { applied, fly, smallShow } from "./small-show.ts";

const ring = (id: string, radius: number, place: object = {}, more: object = {}) => ({
	id,
	shape: { kind: "ring", count: 12, radius },
	place: { position: [0, 40, 40], ...place },
	...more,
});

function mend(show: Show, id: string) {
	const { flight, check } = fly(show);
	return mendedFormation(show, fleetSlotsOf(show), flight, check, id).map(({ remedy }) => remedy);
}

/** Applied and checked from scratch. */
function expectMended(show: Show, id: string): string[] {
	const remedies = mend(show, id);
	for (const remedy of remedies) {
		const { check } = fly(applied(show, remedy));
		expect(check.formations.find((one) => one.id === id)!.verdicts, remedy.change).toContain("flies");
		expect(remedy.ghost!.length).toBeGreaterThan(0);
	}
	return remedies.map(({ kind }) => kind);
}

describe("remedies of a formation in which the fleet can't stand", () => {
	it("enlarge one that is too close, or push its slots apart, and both then keep the spacing", () => {
		const show = smallShow(12, [ring("a", 8), ring("b", 2)], [{ at: 60, length: 60, formation: "b" }]);
		expect(fly(show).check.formations[1].verdicts).toEqual(["too-close"]);
		expect(expectMended(show, "b").sort()).toEqual(["enlarge", "part-slots"]);
		const enlarge = mend(show, "b").find(({ kind }) => kind === "enlarge")!;
		expect(enlarge.cost).toContain("All flights to and from it fly.");
		const { gap } = fly(applied(show, enlarge)).check.formations[1];
		// The smallest size, to a thousandth.
		expect(gap).toBeLessThan(show.fleet.limits.spacing * 1.002 + 0.002);
	});

	it("keep colours and groups when slots are pushed apart", () => {
		const colours = Array.from({ length: 12 }, (_, i) => (i % 2 === 0 ? "#ff0000" : "#0000ff"));
		const b = ring("b", 2, {}, { colours, groups: { east: [0, 1, 2] } });
		const show = smallShow(12, [ring("a", 8), b], [{ at: 60, length: 60, formation: "b" }]);
		const remedy = mend(show, "b").find(({ kind }) => kind === "part-slots")!;
		const after = applied(show, remedy).formations.byId.b;
		expect(after.colours).toEqual(colours);
		expect(after.groups).toEqual({ east: [0, 1, 2] });
		expect(remedy.cost).toContain("It becomes points");
	});

	it("bring one that stands outside the flight volume in, the shortest way", () => {
		const venue = { volume: { min: [-50, 0, 2], max: [50, 100, 60] } };
		const show = smallShow(
			12,
			[ring("a", 8), ring("b", 8, { position: [47, 40, 40] })],
			[{ at: 60, length: 60, formation: "b" }],
			venue,
		);
		const [remedy] = mend(show, "b");
		expect(remedy.kind).toBe("bring-in");
		expect(remedy.change).toBe("Move b 5.0 m further left.");
		expect(expectMended(show, "b")).toEqual(["bring-in"]);
	});

	it("shrink one that is larger than the flight volume", () => {
		const venue = { volume: { min: [-50, 0, 2], max: [50, 100, 60] } };
		const show = smallShow(12, [ring("a", 8), ring("b", 60)], [{ at: 60, length: 120, formation: "b" }], venue);
		expect(expectMended(show, "b")).toEqual(["shrink-in"]);
	});

	it("move one out of what is blocked", () => {
		const venue = { blocked: [{ min: [4, 30, 0], max: [30, 50, 60] }] };
		const show = smallShow(
			12,
			[ring("a", 8, { position: [-40, 40, 40] }), ring("b", 8)],
			[{ at: 60, length: 120, formation: "b" }],
			venue,
		);
		expect(fly(show).check.formations[1].verdicts).toEqual(["out-of-venue"]);
		const [remedy] = mend(show, "b");
		expect(remedy.change).toBe("Move b 4.0 m further left.");
		expectMended(show, "b");
	});

	it("are not offered for one in which the fleet can stand", () => {
		const show = smallShow(12, [ring("a", 8), ring("b", 9)], [{ at: 60, length: 60, formation: "b" }]);
		expect(mend(show, "b")).toEqual([]);
	});

	it("name a flight that would no longer fly", () => {
		const show = smallShow(12, [ring("a", 8), ring("b", 0.4), ring("c", 8)], [{ at: 60, length: 3, formation: "b" }]);
		const enlarge = mend(show, "b").find(({ kind }) => kind === "enlarge")!;
		expect(enlarge.cost).toContain("Still to be mended then: cue 1.");
	});
});
