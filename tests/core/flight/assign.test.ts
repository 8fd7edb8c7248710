import fc from "fast-check";
import { linearSumAssignment } from "linear-sum-assignment";
import { describe, expect, it } from "vitest";
import { assign } from "../../../src/core/flight/assign/assign.ts";
import { createRandom } from "../../../src/core/maths/index.ts";

function cloud(count: number, seed: number, side = 60000, step = 1): Float64Array {
	const random = createRandom(seed);
	return Float64Array.from({ length: 3 * count }, () => Math.round((random.next() * side) / step) * step);
}

function cost(from: Float64Array, to: Float64Array, target: ArrayLike<number>): number {
	let sum = 0;
	for (let i = 0; i < target.length; i++) {
		for (let axis = 0; axis < 3; axis++) sum += (from[3 * i + axis] - to[3 * target[i] + axis]) ** 2;
	}
	return sum;
}

/** npm linear-sum-assignment (Jonker & Volgenant 1987 as D. Crouse 2016 writes it), on the whole matrix. */
function reference(from: Float64Array, to: Float64Array): number {
	const count = from.length / 3;
	const matrix = Array.from({ length: count }, (_, i) =>
		Array.from({ length: count }, (_, j) => {
			let square = 0;
			for (let axis = 0; axis < 3; axis++) square += (from[3 * i + axis] - to[3 * j + axis]) ** 2;
			return square;
		}),
	);
	const { columnAssignments, rowAssignments } = linearSumAssignment(matrix, { maximaze: false });
	void columnAssignments;
	return cost(from, to, rowAssignments);
}

describe("who goes where", () => {
	it.each([
		["scattered", cloud(80, 1), cloud(80, 2)],
		["a raster with massive ties", cloud(90, 3, 9000, 1500), cloud(90, 4, 9000, 1500)],
		["one plane", cloud(70, 5).map((v, k) => (k % 3 === 1 ? 0 : v)), cloud(70, 6).map((v, k) => (k % 3 === 1 ? 0 : v))],
		["one line onto a cloud", cloud(60, 7).map((v, k) => (k % 3 === 0 ? v : 0)), cloud(60, 8)],
		["all at one place", new Float64Array(3 * 20), cloud(20, 9)],
		["the same set", cloud(120, 10), cloud(120, 10)],
	])("is as cheap as the reference library says: %s", (_name, from, to) => {
		const found = assign(from, to)!;
		expect([...found.target].sort((a, b) => a - b)).toEqual(Array.from(found.target, (_, i) => i));
		expect(cost(from, to, found.target)).toBe(reference(from, to));
		expect(found.cost).toBe(cost(from, to, found.target));
	});

	it("carries its certificate: dual feasible over all pairs, and no gap between cost and bound", () => {
		for (const count of [1, 2, 3, 50, 400, 1500]) {
			const [from, to] = [cloud(count, count), cloud(count, count + 1)];
			const { u, v, cost: paid, bound, optimal, target } = assign(from, to)!;
			expect(optimal).toBe(true);
			expect(bound).toBe(paid);
			let violated = 0;
			for (let i = 0; i < count; i++) {
				for (let j = 0; j < count; j++) {
					let square = 0;
					for (let axis = 0; axis < 3; axis++) square += (from[3 * i + axis] - to[3 * j + axis]) ** 2;
					if (u[i] + v[j] > square) violated++;
				}
			}
			expect(violated).toBe(0);
			expect(new Set(target).size).toBe(count);
		}
	});

	it("does not care how slots are numbered, shifted, turned or scaled", () => {
		fc.assert(
			fc.property(
				fc.integer({ min: 2, max: 40 }),
				fc.integer({ min: 1, max: 1000 }),
				fc.integer({ min: 1, max: 900 }),
				(count, seed, scale) => {
					const [from, to] = [cloud(count, seed, 5000), cloud(count, seed + 7, 5000)];
					const plain = assign(from, to)!.cost;
					const turned = new Float64Array(from.length);
					for (let i = 0; i < count; i++) turned.set(from.subarray(3 * i, 3 * i + 3), 3 * (count - 1 - i));
					expect(assign(turned, to)!.cost).toBe(plain);
					const larger = (set: Float64Array) => set.map((value) => value * scale + 1234);
					expect(assign(larger(from), larger(to))!.cost).toBe(plain * scale * scale);
					// A quarter turn about the vertical keeps whole millimetres.
					const yawed = (set: Float64Array) => set.map((_, k) => [-set[k + 1], set[k - 1], set[k]][k % 3]);
					expect(assign(yawed(from), yawed(to))!.cost).toBe(plain);
				},
			),
			{ numRuns: 40 },
		);
	});

	it("makes swapping any two drones never cheaper: u·w ≥ 0 for every pair", () => {
		const [from, to] = [cloud(150, 21), cloud(150, 22)];
		const { target } = assign(from, to)!;
		for (let i = 0; i < 150; i++) {
			for (let j = 0; j < i; j++) {
				let product = 0;
				for (let axis = 0; axis < 3; axis++) {
					product += (from[3 * i + axis] - from[3 * j + axis]) * (to[3 * target[i] + axis] - to[3 * target[j] + axis]);
				}
				expect(product).toBeGreaterThanOrEqual(0);
			}
		}
	});

	it("says so where what is allowed holds no complete matching", () => {
		expect(assign(cloud(6, 1), cloud(6, 2), (i, j) => i !== 3 || j > 5)).toBeNull();
	});
});
