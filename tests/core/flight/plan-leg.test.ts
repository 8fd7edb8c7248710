import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { assign } from "../../../src/core/flight/assign/assign.ts";
import {
	type LegProblem,
	lawAt,
	lawDuration,
	type Plan,
	planLeg,
	provePlan,
	withKey,
} from "../../../src/core/flight/index.ts";
import { scaledMillimetres } from "../../../src/core/flight/measure.ts";
import { straightPaths } from "../../../src/core/flight/paths/polynomial-paths.ts";
import { smallestSeparation } from "../../../src/core/flight/proof/separation.ts";
import { createRandom, smallestGap } from "../../../src/core/maths/index.ts";
import { LIMITS } from "./usual-limits.ts";

/** Points at least `apart` from each other in the measure of spacing, on whole millimetres, in random order. */
function scatter(count: number, seed: number, apart: number): Float64Array {
	const random = createRandom(seed);
	const side = Math.ceil(Math.cbrt(count)) + 1;
	const cells = Array.from({ length: side ** 3 }, (_, i) => i);
	for (let i = cells.length - 1; i > 0; i--) {
		const j = random.below(i + 1);
		[cells[i], cells[j]] = [cells[j], cells[i]];
	}
	const pitch = Math.ceil(apart * 1000 + 2) / 1000;
	const [dx, dy] = [random.next() * 20, random.next() * 20];
	return Float64Array.from({ length: 3 * count }, (_, k) => {
		const cell = cells[Math.floor(k / 3)];
		const at = [cell % side, Math.floor(cell / side) % side, Math.floor(cell / side ** 2)][k % 3];
		return Math.round(([dx, dy, 20][k % 3] + at * pitch * (k % 3 === 2 ? LIMITS.downwash : 1)) * 1000) / 1000;
	});
}

function problemOf(from: Float64Array, to: Float64Array, timeLaw: "s-curve" | "minimum-jerk" = "s-curve"): LegProblem {
	return withKey({
		id: "t",
		kind: "transition",
		fromFormation: "a",
		toFormation: "b",
		from,
		to,
		target: null,
		delays: null,
		limits: LIMITS,
		volume: { min: [-300, -300, 0], max: [300, 300, 300] },
		blocked: [],
		timeLaw,
		available: null,
	});
}

/** Positions by the plan's own polynomials, evaluated here and not by the program. */
function at(plan: Plan, seconds: number, out: Float64Array): void {
	const s = lawAt(plan.law, seconds);
	const width = plan.degree + 1;
	for (let k = 0; k < out.length; k++) {
		let value = 0;
		for (let p = plan.degree; p >= 0; p--) value = value * s + plan.paths[k * width + p];
		out[k] = value;
	}
}

describe("a planned transition", () => {
	it("passes its proof, and brute force at 1 kHz finds nothing that the proof has not allowed", () => {
		fc.assert(
			fc.property(
				fc.integer({ min: 2, max: 14 }),
				fc.integer({ min: 1, max: 1e6 }),
				fc.constantFrom<"s-curve" | "minimum-jerk">("s-curve", "minimum-jerk"),
				(count, seed, law) => {
					const problem = problemOf(scatter(count, seed, 1.5), scatter(count, seed + 1, 1.5), law);
					const plan = planLeg(problem);
					const proof = provePlan(plan, problem, plan.shortest);
					expect(proof.verdicts).toContain("flies");
					const [now, before] = [new Float64Array(3 * count), new Float64Array(3 * count)];
					at(plan, 0, before);
					let [gap, level, up, down] = [Number.POSITIVE_INFINITY, 0, 0, 0];
					for (let k = 1; k <= Math.ceil(plan.shortest * 1000); k++) {
						at(plan, k / 1000, now);
						gap = Math.min(gap, smallestGap(now, LIMITS.downwash).distance);
						for (let i = 0; i < count; i++) {
							level = Math.max(
								level,
								Math.hypot(now[3 * i] - before[3 * i], now[3 * i + 1] - before[3 * i + 1]) * 1000,
							);
							up = Math.max(up, (now[3 * i + 2] - before[3 * i + 2]) * 1000);
							down = Math.max(down, (before[3 * i + 2] - now[3 * i + 2]) * 1000);
						}
						before.set(now);
					}
					expect(gap).toBeGreaterThanOrEqual(proof.gap!.distance - 1e-9);
					expect(level).toBeLessThanOrEqual(proof.peak.horizontal + 1e-6);
					expect(up).toBeLessThanOrEqual(proof.peak.climb + 1e-6);
					expect(down).toBeLessThanOrEqual(proof.peak.descent + 1e-6);
				},
			),
			{ numRuns: 12 },
		);
	});

	it("starts and ends in its slots, each end slot taken once", () => {
		const problem = problemOf(scatter(60, 3, 1.5), scatter(60, 4, 1.5));
		const plan = planLeg(problem);
		const out = new Float64Array(180);
		at(plan, 0, out);
		expect(Math.max(...out.map((value, k) => Math.abs(value - problem.from[k])))).toBeLessThan(1e-9);
		at(plan, lawDuration(plan.law), out);
		for (let i = 0; i < 60; i++)
			for (let axis = 0; axis < 3; axis++)
				expect(out[3 * i + axis]).toBeCloseTo(problem.to[3 * plan.target[i] + axis], 9);
		expect(new Set(plan.target).size).toBe(60);
	});

	it("is the same plan every time", () => {
		const problem = problemOf(scatter(40, 8, 1.5), scatter(40, 9, 1.5));
		expect(planLeg(problem)).toEqual(planLeg(problem));
	});

	it("needs no more than 1.35 of the straight-line bound between two blocks at exactly the spacing, 40 m apart", () => {
		for (let seed = 1; seed <= 6; seed++) {
			const far = scatter(100, seed + 50, 1.5).map((value, k) => (k % 3 === 0 ? value + 40 : value));
			const problem = problemOf(scatter(100, seed, 1.5), far);
			const plan = planLeg(problem);
			expect(provePlan(plan, problem, plan.shortest).verdicts).toContain("flies");
			expect(plan.shortest / plan.straightLineBound).toBeLessThan(1.35);
			expect(plan.shortest).toBeGreaterThanOrEqual(plan.straightLineBound * (1 - 1e-9));
		}
	});

	it("has no conflict on straight lines where both formations are spaced √2 apart (Turpin, Michael & Kumar 2014)", () => {
		for (let seed = 1; seed <= 8; seed++) {
			const [from, to] = [seed, seed + 20].map((one) => scatter(80, one, 1.5 * Math.SQRT2 + 0.003));
			const solved = assign(scaledMillimetres(from, LIMITS.downwash), scaledMillimetres(to, LIMITS.downwash));
			const { coefficients } = straightPaths(from, to, solved!.target);
			expect(smallestSeparation(coefficients, 1, 80, LIMITS.downwash).distance).toBeGreaterThanOrEqual(1.498);
		}
	});

	it("keeps more than the spacing where the formations leave room and it costs no time", () => {
		const far = (seed: number, away: number) =>
			scatter(60, seed, 1.8).map((value, k) => (k % 3 === 1 ? value + away : value));
		const problem = problemOf(far(3, 0), far(7, 40));
		const plan = planLeg(problem);
		const proof = provePlan(plan, problem, plan.shortest);
		expect(proof.gap!.distance).toBeGreaterThan(1.1 * 1.5 - 0.003);
		expect(plan.shortest).toBeLessThan(1.1 * plan.straightLineBound);
	});

	it("stands still where nothing moves, and flies alone as the closed form says", () => {
		const still = scatter(10, 5, 1.5);
		expect(planLeg(problemOf(still, still)).shortest).toBe(0);
		// 60 m level at 6 m/s, 3 m/s², 10 m/s³: d/v + v/a + a/j.
		const alone = planLeg(problemOf(Float64Array.of(0, 0, 20), Float64Array.of(60, 0, 20)));
		expect(alone.shortest).toBeCloseTo(10 + 2 + 0.3, 6);
	});

	it("says too fast for less than it needs, and flies for exactly that", () => {
		const problem = problemOf(scatter(20, 1, 2.2), scatter(20, 2, 2.2));
		const plan = planLeg(problem);
		expect(provePlan(plan, problem, plan.shortest * 0.98).verdicts).toContain("too-fast");
		expect(provePlan(plan, problem, plan.shortest).verdicts).toContain("flies");
		expect(provePlan(plan, problem, plan.shortest * 2).verdicts).toEqual([
			"flies",
			...(provePlan(plan, problem, plan.shortest * 2).verdicts.includes("tight") ? ["tight"] : []),
		]);
	});

	it("finds the gap of straight paths that a check at 25 Hz would miss", () => {
		// Two drones that cross at 12 m/s pass each other within 0.01 m for less than a frame.
		const paths = Float64Array.of(0, 12, 0, 0, 10, 0, 12, -12, 0.01, 0, 10, 0);
		expect(smallestSeparation(paths, 1, 2, 2).distance).toBeCloseTo(0.01, 9);
	});
});
