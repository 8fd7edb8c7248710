import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { type LegProblem, lawDuration, planLeg, provePlan, withKey } from "../../../src/core/flight/index.ts";
import { lawForPaths } from "../../../src/core/flight/law/fleet-law.ts";
import { createLookout } from "../../../src/core/flight/parting/approaches.ts";
import { bentPaths, pointsAt, straightBends } from "../../../src/core/flight/parting/bends.ts";
import { createCells } from "../../../src/core/flight/parting/cells.ts";
import { createPace } from "../../../src/core/flight/parting/pace.ts";
import { peaksOfFlight } from "../../../src/core/flight/proof/peaks.ts";
import { createRandom } from "../../../src/core/maths/index.ts";
import type { Box } from "../../../src/core/show/index.ts";
import { formationPairs } from "../../problems/formation-pairs.ts";
import { LIMITS } from "./usual-limits.ts";

function problemOf(from: Float64Array, to: Float64Array, blocked: readonly Box[] = []): LegProblem {
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
		volume: { min: [-600, -600, 0], max: [600, 600, 600] },
		blocked,
		timeLaw: "s-curve",
		available: null,
	});
}

const seeds = fc.integer({ min: 1, max: 1e6 });

function randomPoints(count: number, seed: number, size: number): Float64Array {
	const random = createRandom(seed);
	return Float64Array.from({ length: 3 * count }, () => random.next() * size);
}

/** Random ends and random bends. */
function randomBends(count: number, seed: number) {
	const from = randomPoints(count, seed, 8);
	const to = randomPoints(count, seed + 1, 12);
	const target = Int32Array.from({ length: count }, (_, i) => (i + 1) % count);
	const bends = straightBends(from, to, target, LIMITS.downwash);
	const random = createRandom(seed + 2);
	for (let c = 0; c < 3 * count; c++) {
		bends.leave[c] = 8 * (random.next() - 0.5);
		bends.reach[c] = 8 * (random.next() - 0.5);
	}
	return { from, to, target, bends };
}

describe("near pairs", () => {
	it("are the same as by looking at every pair", () => {
		fc.assert(
			fc.property(fc.integer({ min: 2, max: 60 }), seeds, (count, seed) => {
				const points = randomPoints(count, seed, 10);
				const found = new Set<string>();
				createCells(count).pairs(points, 1.7, (i, j) => {
					const key = `${Math.min(i, j)} ${Math.max(i, j)}`;
					expect(found.has(key)).toBe(false);
					found.add(key);
				});
				let expected = 0;
				for (let i = 0; i < count; i++) {
					for (let j = i + 1; j < count; j++) {
						const far = Math.hypot(...[0, 1, 2].map((axis) => points[3 * i + axis] - points[3 * j + axis]));
						if (far >= 1.7) continue;
						expected++;
						expect(found.has(`${i} ${j}`)).toBe(true);
					}
				}
				expect(found.size).toBe(expected);
			}),
			{ numRuns: 60 },
		);
	});

	it("are told with their nearest approach: 2 000 instants find none nearer but at the ends", () => {
		fc.assert(
			fc.property(fc.integer({ min: 2, max: 12 }), seeds, (count, seed) => {
				const { bends } = randomBends(count, seed);
				const near = createLookout(bends, 1.5).look(1.5);
				const told = new Map<string, number>();
				for (let k = 0; k < near.count; k++) {
					const key = `${near.first[k]} ${near.second[k]}`;
					told.set(key, Math.min(told.get(key) ?? Infinity, near.distance[k]));
				}
				const least = new Map<string, { distance: number; step: number }>();
				const points = new Float64Array(3 * count);
				for (let step = 0; step <= 2000; step++) {
					pointsAt(bends, step / 2000, points);
					for (let i = 0; i < count; i++) {
						for (let j = i + 1; j < count; j++) {
							const distance = Math.hypot(...[0, 1, 2].map((axis) => points[3 * i + axis] - points[3 * j + axis]));
							const known = least.get(`${i} ${j}`);
							if (!known || distance < known.distance) least.set(`${i} ${j}`, { distance, step });
						}
					}
				}
				for (const [key, { distance, step }] of least) {
					if (distance < 1.4 && step > 0 && step < 2000) {
						expect(told.get(key)).toBeDefined();
						expect(told.get(key)).toBeLessThan(distance + 1e-4);
					}
				}
			}),
			{ numRuns: 40 },
		);
	});
});

describe("haste", () => {
	it("is what the proof's exact peaks ask for, to within the instants looked at, and yielding never raises it", () => {
		fc.assert(
			fc.property(fc.integer({ min: 2, max: 6 }), seeds, (count, seed) => {
				const { from, to, target, bends } = randomBends(count, seed);
				const paths = bentPaths(from, to, target, bends, LIMITS.downwash);
				const law = lawForPaths(paths, count, LIMITS, "s-curve");
				const duration = lawDuration(law);
				const pace = createPace(law, LIMITS, LIMITS.downwash);
				let most = 0;
				for (let i = 0; i < count; i++) most = Math.max(most, pace.haste(bends, i, duration));
				const peaks = peaksOfFlight(paths.coefficients, paths.degree, count, law);
				const exact = Math.max(
					peaks.horizontal / LIMITS.horizontal,
					peaks.climb / LIMITS.climb,
					peaks.descent / LIMITS.descent,
					Math.sqrt(peaks.acceleration / LIMITS.acceleration),
					Math.cbrt(peaks.jerk / LIMITS.jerk),
				);
				expect(most).toBeLessThan(exact + 1e-6);
				expect(most).toBeGreaterThan(0.93 * exact);
				for (let i = 0; i < count; i++) {
					const before = pace.yieldTo(bends, i, 0.8 * duration);
					expect(pace.haste(bends, i, 0.8 * duration)).toBeLessThanOrEqual(before + 1e-12);
				}
			}),
			{ numRuns: 60 },
		);
	});
});

describe("hard pairs of formations at exactly the spacing", () => {
	for (const { name, from, to } of formationPairs(100)) {
		it(`fly within their proof and 1.6 of the straight-line bound: ${name}`, () => {
			const problem = problemOf(from, to);
			const plan = planLeg(problem);
			expect(provePlan(plan, problem, plan.shortest).verdicts).toContain("flies");
			expect(plan.shortest).toBeLessThan(1.6 * plan.straightLineBound + 1e-9);
		});
	}
});

describe("a blocked volume in the way", () => {
	const [from, to] = [new Float64Array(180), new Float64Array(180)];
	for (let i = 0; i < 60; i++) {
		const [x, z] = [2 * (i % 10) - 9, 30 + 3.1 * Math.floor(i / 10)];
		from.set([x, 0, z], 3 * i);
		to.set([x, 60, z], 3 * i);
	}
	const cases: [string, Box][] = [
		["a tower, to both sides", { min: [-3, 28, 0], max: [3, 32, 60] }],
		["a wall, over its top", { min: [-80, 28, 0], max: [80, 32, 34] }],
		["a thin mast", { min: [-0.3, 29.8, 0], max: [0.3, 30.2, 60] }],
	];
	for (const [name, box] of cases) {
		it(`is flown round: ${name}`, () => {
			const problem = problemOf(from, to, [box]);
			const plan = planLeg(problem);
			expect(provePlan(plan, problem, plan.shortest).verdicts).toContain("flies");
			// Brute force, by the plan's own polynomials: nobody inside the box at any of 4 000 instants.
			for (let k = 0; k <= 4000; k++) {
				const s = k / 4000;
				for (let i = 0; i < 60; i++) {
					const inside = [0, 1, 2].every((axis) => {
						let value = 0;
						for (let p = plan.degree; p >= 0; p--) {
							value = value * s + plan.paths[(3 * i + axis) * (plan.degree + 1) + p];
						}
						return value > box.min[axis] && value < box.max[axis];
					});
					if (inside) throw new Error(`drone ${i} is inside at s = ${s}`);
				}
			}
		});
	}

	it("that reaches from wall to wall and to the ceiling is refused with the reason", () => {
		const problem = problemOf(from, to, [{ min: [-600, 28, 0], max: [600, 32, 600] }]);
		const plan = planLeg(problem);
		expect(provePlan(plan, problem, plan.shortest).verdicts).toContain("out-of-venue");
	});
});
