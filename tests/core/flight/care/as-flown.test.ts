import { describe, expect, it } from "vitest";
import { airtimeOf } from "../../../../src/core/flight/care/airtime.ts";
import { flyAsFollowed, gustPush } from "../../../../src/core/flight/care/as-flown.ts";
import { GRAVITY } from "../../../../src/core/flight/care/fall.ts";
import { Followers } from "../../../../src/core/flight/care/follower.ts";
import { motionOnLeg } from "../../../../src/core/flight/care/motion.ts";
import { flightOf, showWith, steadyLeg } from "./one-leg.ts";

const tracking = { frequency: 0.8, damping: 0.8, recovery: 2, delay: 0, spread: 0 };
const omega = 2 * Math.PI * 0.8;

describe("the fleet as flown", () => {
	it("lags by speed × 2ζ/ω on a straight flight at steady speed, and no drone nearer to another than planned", () => {
		// Two drones side by side, 60 m in 10 s; alike, so what is between them stays.
		const flight = flightOf([
			steadyLeg("c1", 0, 10, [0, 0, 50, 0, 2, 50], [60, 0, 50, 60, 2, 50]),
			steadyLeg("landing", 40, 5, [60, 0, 50, 60, 2, 50], [60, 0, 0, 60, 2, 0]),
		]);
		const flown = flyAsFollowed(showWith(2, { tracking }), flight);
		expect(flown.steady).toBe(true);
		expect(flown.lag).toBeCloseTo(1.6 / omega, 9);
		expect(flown.legs).toHaveLength(1);
		const [leg] = flown.legs;
		// The start is abrupt, so the lag swings a little past what it settles to.
		expect(leg.lag.distance).toBeGreaterThan(6 * flown.lag);
		expect(leg.lag.distance).toBeLessThan(1.06 * 6 * flown.lag);
		expect(leg.atArrival).toBeCloseTo(6 * flown.lag, 1);
		expect(leg.settled).toBeGreaterThan(0.3);
		expect(leg.settled).toBeLessThan(2);
		expect(leg.gap?.distance).toBeCloseTo(2, 6);
	});

	it("comes nearer where drones differ: one behind the other at steady speed, by the difference of their lags", () => {
		const leg = steadyLeg("c1", 0, 12, [0, 0, 50, -2, 0, 50], [72, 0, 50, 70, 0, 50]);
		const show = (spread: number) => showWith(2, { tracking: { ...tracking, spread } });
		const gaps = [0, 0.2].map((spread) => flyAsFollowed(show(spread), flightOf([leg])).legs[0].gap?.distance ?? 0);
		expect(gaps[0]).toBeCloseTo(2, 6);
		// 6 m/s × 0.32 s × 2 × 20 % is the most that two can differ, or less as the seed has it.
		expect(gaps[1]).toBeGreaterThan(2 - 6 * (1.6 / omega) * (1 / 0.8 - 1 / 1.2) * 1.1);
		expect(gaps[1]).not.toBeCloseTo(2, 2);
	});

	it("is on a bent path what following each axis of each drone gives", () => {
		const straight = steadyLeg("c1", 0, 8, [0, 0, 50, 0, 3, 50], [40, 0, 60, 40, 3, 60]);
		// x, y, z of both drones by powers of s: out of the straight by 4s(1 − s) times 5 m, −3 m, 2 m.
		const bends = [5, -3, 2, -5, 1, 2];
		const paths = Float64Array.from(
			bends.flatMap((bend, k) => {
				const [start, way] = straight.plan.paths.subarray(2 * k, 2 * k + 2);
				return [start, way + 4 * bend, -4 * bend];
			}),
		);
		const leg = { ...straight, plan: { ...straight.plan, degree: 2, paths } };
		const show = showWith(2, { tracking: { ...tracking, delay: 0.05 } });
		const [flown] = flyAsFollowed(show, flightOf([leg])).legs;

		const one = { omega, damping: 0.8, integral: 0.5, delay: 0.05 };
		const [path, unused] = [new Float64Array(6), new Float64Array(6)];
		motionOnLeg(leg, 2, 0, path, unused);
		const followers = new Followers([one, one], path, 1 / 110);
		let [lag, gap] = [0, Number.POSITIVE_INFINITY];
		for (let step = 0; step < 880; step++) {
			motionOnLeg(leg, 2, step / 110, path, unused);
			followers.advance(path, null);
			if (step % 11 !== 10) continue;
			motionOnLeg(leg, 2, (step + 1) / 110, path, unused);
			const at = followers.positions;
			for (const k of [0, 3])
				lag = Math.max(lag, Math.hypot(...[0, 1, 2].map((axis) => at[k + axis] - path[k + axis])));
			gap = Math.min(gap, Math.hypot(at[3] - at[0], at[4] - at[1], (at[5] - at[2]) / 2));
		}
		expect(flown.lag.distance).toBeCloseTo(lag, 9);
		// Looked at only at instants here, straight between them there.
		expect(flown.gap!.distance).toBeLessThanOrEqual(gap + 1e-9);
		expect(flown.gap!.distance).toBeGreaterThan(gap - 0.05);
	});

	it("counts a gust against the gap once, by what it pushes one drone", () => {
		const leg = steadyLeg("c1", 0, 10, [0, 0, 50, 0, 2, 50], [60, 0, 50, 60, 2, 50]);
		const flown = flyAsFollowed(showWith(2, { tracking, terminalSpeed: 15 }, { wind: 6, gust: 4 }), flightOf([leg]));
		const push = gustPush(6, 4, 15);
		expect(push).toBeCloseTo((GRAVITY * (100 - 36)) / 225, 9);
		// Without integral action it would be push/ω² × (1 + overshoot); with it, less, and not below half of that.
		const most = (push / omega ** 2) * (1 + Math.exp((-Math.PI * 0.8) / 0.6));
		expect(flown.push).toBeLessThan(most);
		expect(flown.push).toBeGreaterThan(most / 2);
		expect(flown.legs[0].gapInGust).toBeCloseTo(2 - flown.push, 6);
	});

	it("is not followed where the delay is more than the loop can bear", () => {
		const leg = steadyLeg("c1", 0, 10, [0, 0, 50], [60, 0, 50]);
		const flown = flyAsFollowed(showWith(1, { tracking: { ...tracking, delay: 1 } }), flightOf([leg]));
		expect(flown).toMatchObject({ steady: false, legs: [] });
		expect(flown.delayMargin).toBeLessThan(1);
	});
});

describe("motor time", () => {
	it("runs for each drone from its wave's turn until it is down", () => {
		const flight = flightOf([
			steadyLeg("launch", -40, 8, [0, 0, 0, 1, 0, 0], [0, 0, 8, 1, 0, 8], Float64Array.of(0, 5)),
			steadyLeg("landing", 100, 8, [0, 0, 8, 1, 0, 8], [0, 0, 0, 1, 0, 0], Float64Array.of(5, 0)),
		]);
		const airtime = airtimeOf(showWith(2, {}), flight);
		// The first up is the last down: −40 to 113; the other −35 to 108.
		expect(airtime?.seconds).toEqual([153, 143]);
		expect(airtime?.longest).toEqual({ drone: 0, seconds: 153 });
		expect(airtime?.shortest).toEqual({ drone: 1, seconds: 143 });
		expect(airtime?.limit).toBe(675);
	});
});
