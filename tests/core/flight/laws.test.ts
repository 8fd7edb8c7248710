import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { minimumJerkTime, sCurveTime } from "../../../src/core/flight/law/straight-time.ts";
import { dilate, lawAt, lawDuration, minimumJerkLaw, sCurveLaw } from "../../../src/core/flight/law/time-law.ts";

const rate = fc.double({ min: 0.01, max: 100, noNaN: true });
const rates = fc.record({ speed: rate, acceleration: rate, jerk: rate });

describe("minimum jerk, rest to rest", () => {
	// Flash & Hogan 1985: over distance d in time T the peaks are 15/8 d/T, 10/√3 d/T², 60 d/T³.
	it("takes the shortest time in which none of the published peaks passes its limit", () => {
		expect(minimumJerkTime(8, { speed: 5, acceleration: 1e9, jerk: 1e9 })).toBeCloseTo((15 * 8) / (8 * 5), 12);
		expect(minimumJerkTime(8, { speed: 1e9, acceleration: 2, jerk: 1e9 })).toBeCloseTo(
			Math.sqrt((10 * 8) / (Math.sqrt(3) * 2)),
			12,
		);
		expect(minimumJerkTime(8, { speed: 1e9, acceleration: 1e9, jerk: 3 })).toBeCloseTo(Math.cbrt((60 * 8) / 3), 12);
	});

	it("runs along 10τ³ − 15τ⁴ + 6τ⁵", () => {
		const law = minimumJerkLaw({ speed: 0.2, acceleration: 0.1, jerk: 0.1 });
		const T = lawDuration(law);
		for (const tau of [0, 0.1, 0.25, 0.5, 0.8, 1]) {
			expect(lawAt(law, tau * T)).toBeCloseTo(10 * tau ** 3 - 15 * tau ** 4 + 6 * tau ** 5, 10);
		}
	});
});

describe("jerk-limited S-curve, rest to rest", () => {
	// Closed forms as in Biagiotti & Melchiorri 2008, §3.4: figures worked by hand from them.
	it("has the three published cases for v·j ≥ a² and the two for v·j < a²", () => {
		const limits = { speed: 6, acceleration: 3, jerk: 10 };
		expect(sCurveTime(60, limits)).toBeCloseTo(60 / 6 + 6 / 3 + 3 / 10, 12);
		expect(sCurveTime(4, limits)).toBeCloseTo(0.3 + Math.sqrt(0.09 + 16 / 3), 12);
		expect(sCurveTime(0.1, limits)).toBeCloseTo(4 * Math.cbrt(0.1 / 20), 12);
		const soft = { speed: 2, acceleration: 10, jerk: 4 };
		expect(sCurveTime(9, soft)).toBeCloseTo(9 / 2 + 2 * Math.sqrt(2 / 4), 12);
		expect(sCurveTime(0.5, soft)).toBeCloseTo(4 * Math.cbrt(0.5 / 8), 12);
	});

	it("is never slower than minimum jerk, at any limits over four orders of magnitude", () => {
		fc.assert(
			fc.property(rates, rate, (limits, distance) => {
				expect(sCurveTime(distance, limits)).toBeLessThanOrEqual(minimumJerkTime(distance, limits) * (1 + 1e-9));
			}),
		);
	});

	it("goes from 0 to 1 without turning back, within its limits at every one of 400 instants", () => {
		fc.assert(
			fc.property(rates, (limits) => {
				const law = sCurveLaw(limits);
				const T = lawDuration(law);
				expect(T).toBeCloseTo(sCurveTime(1, limits), 6);
				const h = T / 400;
				let [before, last] = [0, 0];
				for (let k = 1; k <= 400; k++) {
					const s = lawAt(law, k * h);
					expect(s).toBeGreaterThanOrEqual(last - 1e-12);
					expect((s - last) / h).toBeLessThanOrEqual(limits.speed * (1 + 1e-6) + 1e-9 / h);
					if (k > 1)
						expect(Math.abs(s - 2 * last + before) / (h * h)).toBeLessThanOrEqual(
							limits.acceleration * (1 + 1e-6) + 1e-8 / (h * h),
						);
					[before, last] = [last, s];
				}
				expect(last).toBeCloseTo(1, 9);
			}),
			{ numRuns: 20 },
		);
	});

	it("slows uniformly: twice the time is half the speed", () => {
		const law = sCurveLaw({ speed: 0.5, acceleration: 0.4, jerk: 0.6 });
		const slow = dilate(law, 2);
		expect(lawDuration(slow)).toBeCloseTo(2 * lawDuration(law), 12);
		for (const share of [0.13, 0.4, 0.77]) {
			expect(lawAt(slow, share * lawDuration(slow))).toBeCloseTo(lawAt(law, share * lawDuration(law)), 12);
		}
	});
});
