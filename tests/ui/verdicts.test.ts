import { describe, expect, it } from "vitest";
import type { StudioState } from "../../src/app/index.ts";
import { dronePositions, traceLegs } from "../../src/core/flight/index.ts";
import type { Show } from "../../src/core/show/index.ts";
import { sayFormationTrouble, sayWhy } from "../../src/ui/margin/say-trouble.ts";
import { layPlots } from "../../src/ui/margin/trace-plots.ts";
import { marksAt } from "../../src/ui/night-marks.ts";
import { tightestMoment } from "../../src/ui/tightest-moment.ts";
import { fly, smallShow } from "../core/flight/remedy/small-show.ts";

const disc = (id: string, x: number) => ({
	id,
	shape: { kind: "disc", count: 12, radius: 7 },
	place: { position: [x, 50, 40], tilt: 90 },
});
const wall = { min: [-5, 0, 0], max: [5, 100, 100] };
const short = smallShow(12, [disc("a", -25), disc("b", 25)], [{ at: 60, length: 14, formation: "b" }]);
const blocked = smallShow(12, [disc("a", -25), disc("b", 25)], [{ at: 60, length: 60, formation: "b" }], {
	volume: { min: [-60, 0, 0], max: [60, 100, 100] },
	blocked: [wall],
});

/** What the screens know once a show has been checked, one cue selected. */
function stateOf(show: Show): StudioState {
	const { flight, check } = fly(show);
	const selection = { kind: "cues" as const, ids: ["c1"] };
	return { show, flight, check, selection, inquired: null, care: null } as unknown as StudioState;
}

const positionsAt = (state: StudioState, seconds: number): Float32Array => {
	const out = new Float32Array(3 * state.flight!.drones);
	dronePositions(state.flight!, seconds, out);
	return out;
};

describe("the tightest moment of a leg", () => {
	it("of one that is too fast is where a drone is over its limit, and such drones are marked", () => {
		const state = stateOf(short);
		const [check] = state.check!.transitions;
		expect(check.verdicts).toContain("too-fast");
		const time = tightestMoment(check, state.flight!, short.fleet.limits);
		expect(time).toBeGreaterThan(check.departs.time);
		expect(time).toBeLessThan(check.arrives.time);
		const { troubled, pair } = marksAt(state, time, positionsAt(state, time), "audience");
		expect(troubled.length).toBeGreaterThan(0);
		expect(pair!.breaks).toBe(false);
		// Before it departs nothing is marked.
		const before = check.departs.time - 1;
		expect(marksAt(state, before, positionsAt(state, before), "audience")).toMatchObject({ troubled: [], pair: null });
	});

	it("of one that meets what is blocked is where the drone named enters it", () => {
		const state = stateOf(blocked);
		const [check] = state.check!.transitions;
		expect(check.verdicts).toContain("out-of-venue");
		const { breach } = check;
		expect(breach!.blocked).toBe(0);
		const time = tightestMoment(check, state.flight!, blocked.fleet.limits);
		expect(time).toBe(breach!.time);
		const inside = (seconds: number): boolean => {
			const at = positionsAt(state, seconds).subarray(3 * breach!.drone, 3 * breach!.drone + 3);
			return [0, 1, 2].every((axis) => at[axis] > wall.min[axis] + 1e-3 && at[axis] < wall.max[axis] - 1e-3);
		};
		expect(inside(time - 0.3)).toBe(false);
		expect([0.1, 0.3, 0.6].some((later) => inside(time + later))).toBe(true);
		expect(marksAt(state, time, positionsAt(state, time), "audience").troubled).toContain(breach!.drone);
		expect(sayWhy(check, blocked)).toMatch(
			/no duration makes it fly\. Drone \d+ enters blocked volume 1 at 0:\d\d\.\d{3} \(-5 to 5 m across, 0 to 100 m away, 0 to 100 m up\)\./,
		);
	});
});

describe("what is said of it", () => {
	it("is time first, then the closest pair, each with its limit", () => {
		const [check] = stateOf(short).check!.transitions;
		expect(sayWhy(check, short)).toMatch(
			/^It has 7\.0 s and needs [\d.]+ s: [\d.]+ s, [\d.]+ beats short\. Drones \d+ and \d+ come to [\d.]+ m of each other at 0:3\d\.\d{3}, with a spacing of 1\.5 m\.$/,
		);
	});

	it("names all that is wrong with a formation", () => {
		expect(sayFormationTrouble({ gap: 0.5, verdicts: ["too-close", "out-of-venue"] }, short)).toBe(
			"its closest slots are 0.50 m apart, and spacing is 1.5 m; it reaches out of the flight volume or into what is blocked.",
		);
	});
});

describe("the plots of a leg", () => {
	const { flight } = fly(short);
	const { limits } = short.fleet;
	const plots = layPlots(
		traceLegs(
			flight.legs.filter(({ id }) => id === "c1"),
			limits,
		),
		limits,
	);

	it("are five, and say which limit is broken", () => {
		expect(plots.map(({ name }) => name)).toEqual([
			"Level speed",
			"Climb and descent",
			"Acceleration",
			"Height",
			"Smallest gap",
		]);
		const [speed, , , height, gap] = plots;
		expect(speed.broken).toBe(true);
		expect(speed.words).toMatch(/^at most [\d.]+ of 6$/);
		expect([height.broken, gap.broken]).toEqual([false, false]);
	});

	it("draw everything inside their area, the limits too", () => {
		for (const { band, line, limits: lines, marks } of plots) {
			const numbers = `${band ?? ""}${line}`.match(/-?[\d.]+/g)!.map(Number);
			for (const value of numbers) {
				expect(value).toBeGreaterThanOrEqual(0);
				expect(value).toBeLessThanOrEqual(100);
			}
			for (const at of [...lines, ...marks.map((mark) => mark.at)]) {
				expect(at).toBeGreaterThanOrEqual(0);
				expect(at).toBeLessThanOrEqual(1);
			}
		}
	});
});
