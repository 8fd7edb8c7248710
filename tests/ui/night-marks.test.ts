import { describe, expect, it } from "vitest";
import type { StudioState } from "../../src/app/index.ts";
import { marksAt } from "../../src/ui/night-marks.ts";
import { careOf, checkOf, show } from "../core/handoff/sample-check.ts";

const state = {
	show: { ...show, venue: { ...show.venue, audience: { from: [-50, -20], to: [50, -20] } } },
	care: careOf(),
	check: checkOf(["flies"]),
	flight: null,
	selection: { kind: "nothing" },
} as unknown as StudioState;
const nothing = new Float32Array(0);

describe("the ground seen from above", () => {
	it("carries the fall zone, the border with its buffer and the audience line", () => {
		const { ground } = marksAt(state, 0, nothing, "plan");
		expect(ground?.zone).toEqual(careOf().fallZone?.outline);
		// The default volume, −100 to 100 m and 0 to 120 m, with 10 m round it.
		expect(ground?.border).toEqual([
			[-110, -10],
			[110, -10],
			[110, 130],
			[-110, 130],
		]);
		expect(ground?.audience).toEqual([
			[-50, -20],
			[50, -20],
		]);
		expect(marksAt(state, 0, nothing, "audience").ground).toBeNull();
	});

	it("says that it breaks where the zone comes nearer to the audience line than the buffer or passes the border, and not otherwise", () => {
		const { fallZone } = careOf();
		const breaks = (audience: number, border: number): boolean | undefined => {
			const zone = {
				...fallZone,
				audience: { drone: 0, time: 0, distance: audience },
				border: { ...fallZone?.border, distance: border },
			};
			return marksAt({ ...state, care: { ...careOf(), fallZone: zone } } as StudioState, 0, nothing, "plan").ground
				?.breaks;
		};
		// The default buffer is 10 m.
		expect(breaks(11, 5)).toBe(false);
		expect(breaks(9, 5)).toBe(true);
		expect(breaks(11, -1)).toBe(true);
	});
});
