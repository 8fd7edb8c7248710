import { describe, expect, it } from "vitest";
import {
	busiestMoment,
	createMotion,
	dronePositions,
	type Leg,
	limitShare,
	motionAt,
	traceLegs,
} from "../../../src/core/flight/index.ts";
import { fly, smallShow } from "./remedy/small-show.ts";

const show = smallShow(
	9,
	[
		{ id: "a", shape: { kind: "ring", count: 9, radius: 6 }, place: { position: [-15, 40, 40] } },
		{ id: "b", shape: { kind: "sphere", count: 9, radius: 5 }, place: { position: [15, 40, 48] } },
	],
	[{ at: 60, length: 24, formation: "b" }],
);
const { flight, check } = fly(show);
const { limits } = show.fleet;
const legsOf = (id: string): Leg[] => flight.legs.filter((leg) => leg.id === id);

describe("the motion of the fleet", () => {
	it("has the derivatives of its positions: central differences of what the preview shows", () => {
		const motion = createMotion(9);
		const at = (time: number): Float64Array => {
			const out = new Float64Array(27);
			dronePositions(flight, time, out);
			return out;
		};
		const step = 1e-3;
		for (const id of ["launch", "c1", "landing"]) {
			for (const leg of legsOf(id)) {
				for (const share of [0.07, 0.31, 0.5, 0.83]) {
					const time = leg.departs + share * (leg.arrives - leg.departs);
					motionAt(leg, time, motion);
					const [before, here, after] = [at(time - step), at(time), at(time + step)];
					for (let k = 0; k < 27; k++) {
						expect(motion.position[k]).toBeCloseTo(here[k], 9);
						expect(motion.velocity[k]).toBeCloseTo((after[k] - before[k]) / (2 * step), 3);
						const second = (after[k] - 2 * here[k] + before[k]) / step ** 2;
						// A jump of the jerk may lie within the step.
						expect(Math.abs(motion.acceleration[k] - second)).toBeLessThan(limits.jerk * step);
					}
				}
			}
		}
	});

	it("peaks of a straight minimum-jerk flight are those of Flash & Hogan (1985)", () => {
		const [distance, seconds] = [20, 10];
		const leg: Leg = {
			id: "x",
			departs: 5,
			arrives: 5 + seconds,
			rowOfDrone: Int32Array.of(0),
			delays: null,
			plan: {
				version: 0,
				target: Int32Array.of(0),
				degree: 1,
				paths: Float64Array.of(0, distance, 0, 0, 30, 0),
				law: {
					kind: "minimum-jerk",
					borders: Float64Array.of(0, 1),
					coefficients: Float64Array.of(0, 0, 0, 10, -15, 6),
				},
				shortest: 1,
				straightLineBound: 1,
				certificate: { optimal: true, cost: 0, bound: 0, cap: null },
				method: "straight",
			},
		};
		const traces = traceLegs([leg], limits, 2001);
		expect(Math.max(...traces.horizontal.most)).toBeCloseTo((15 / 8) * (distance / seconds), 5);
		expect(Math.max(...traces.acceleration.most)).toBeCloseTo((10 / Math.sqrt(3)) * (distance / seconds ** 2), 4);
		expect(traces.gap[1000]).toBe(Number.POSITIVE_INFINITY);
		expect(traces.horizontal.worst).toEqual(traces.horizontal.most);
		expect(traces.times[0]).toBe(5);
		expect(traces.times.at(-1)).toBe(15);
	});

	it("never exceeds what the proof found, and comes near to it", () => {
		for (const transition of [check.launch!, check.transitions[0], check.landing!]) {
			const traces = traceLegs(legsOf(transition.id), limits, 801);
			const { peak, gap } = transition;
			const climbs = Math.max(...traces.climb.most);
			for (const [seen, proven] of [
				[Math.max(...traces.horizontal.most), peak.horizontal],
				[climbs, peak.climb],
				[-Math.min(...traces.climb.least), peak.descent],
				[Math.max(...traces.acceleration.most), peak.acceleration],
			]) {
				expect(seen).toBeLessThanOrEqual(Math.max(0, proven) + 1e-6);
				expect(seen).toBeGreaterThan(0.97 * proven - 0.02);
			}
			const smallest = Math.min(...traces.gap);
			expect(smallest).toBeGreaterThanOrEqual(gap!.distance - 1e-6);
			expect(smallest).toBeLessThan(gap!.distance + 0.1);
			for (let k = 0; k < traces.times.length; k++) {
				for (const name of ["horizontal", "climb", "acceleration", "height"] as const) {
					const { least, most, worst } = traces[name];
					expect(least[k]).toBeLessThanOrEqual(worst[k]);
					expect(worst[k]).toBeLessThanOrEqual(most[k]);
				}
			}
		}
	});

	it("names the instant and the drone that take up most of a limit", () => {
		const legs = legsOf("c1");
		const { time, drone } = busiestMoment(legs, limits, 401);
		const motion = createMotion(9);
		motionAt(legs[0], time, motion);
		const { peak, needed, available } = check.transitions[0];
		expect(needed!).toBeLessThan(available);
		const proven = Math.max(
			peak.horizontal / limits.horizontal,
			peak.climb / limits.climb,
			peak.descent / limits.descent,
			Math.sqrt(peak.acceleration / limits.acceleration),
		);
		const [vx, vy, vz] = motion.velocity.subarray(3 * drone, 3 * drone + 3);
		const [ax, ay, az] = motion.acceleration.subarray(3 * drone, 3 * drone + 3);
		const here = Math.max(
			Math.hypot(vx, vy) / limits.horizontal,
			vz / limits.climb,
			-vz / limits.descent,
			Math.sqrt(Math.hypot(ax, ay, az) / limits.acceleration),
		);
		expect(here).toBeLessThanOrEqual(proven + 1e-6);
		expect(here).toBeGreaterThan(0.98 * proven);
		const all = Math.max(
			...(["horizontal", "climb", "descent", "acceleration", "jerk"] as const).map((name) => peak[name] / limits[name]),
		);
		expect(limitShare(motion, drone, limits)).toBeLessThanOrEqual(all + 1e-6);
	});
});
