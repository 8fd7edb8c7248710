import { describe, expect, it } from "vitest";
import { moveIntoVenue, partSlots } from "../../../src/core/formation/index.ts";
import { createRandom } from "../../../src/core/maths/index.ts";

/** Smallest distance by brute force, z over the downwash factor. */
function gapOf(at: Float64Array, downwash: number): number {
	let least = Number.POSITIVE_INFINITY;
	for (let i = 0; i < at.length; i += 3) {
		for (let j = i + 3; j < at.length; j += 3) {
			least = Math.min(least, Math.hypot(at[i] - at[j], at[i + 1] - at[j + 1], (at[i + 2] - at[j + 2]) / downwash));
		}
	}
	return least;
}

describe("slots pushed apart", () => {
	it.each([1, 2, 3, 4, 5])("keep the spacing afterwards, whatever heap they were (seed %i)", (seed) => {
		const random = createRandom(seed);
		const count = 10 + 20 * seed;
		const flat = seed % 2 === 0;
		const at = Float64Array.from({ length: 3 * count }, (_, k) =>
			flat && k % 3 === 1 ? 30 : Math.round(random.next() * 6000) / 1000,
		);
		const limits = { spacing: 1.5, downwash: seed > 3 ? 1 : 2 };
		const parted = partSlots(at, limits)!;
		expect(parted).not.toBeNull();
		expect(gapOf(parted.positions, limits.downwash)).toBeGreaterThanOrEqual(1.5);
		if (flat) for (let k = 1; k < at.length; k += 3) expect(parted.positions[k]).toBe(30);
	});

	it("part slots on one place, and leave alone those that have room", () => {
		const at = Float64Array.of(0, 0, 10, 0, 0, 10, 20, 0, 10);
		const { positions, furthest } = partSlots(at, { spacing: 2, downwash: 1 })!;
		expect(gapOf(positions, 1)).toBeGreaterThanOrEqual(2);
		expect(Array.from(positions.subarray(6))).toEqual([20, 0, 10]);
		expect(furthest).toBeLessThan(1.1);
	});
});

describe("the shortest move into the venue", () => {
	const volume = { min: [-10, 0, 0] as [number, number, number], max: [10, 20, 30] as [number, number, number] };

	it("is none for what is inside, and just enough for what is not", () => {
		expect(moveIntoVenue(Float64Array.of(0, 5, 5, 10, 20, 30), { volume, blocked: [] })).toEqual([0, 0, 0]);
		const move = moveIntoVenue(Float64Array.of(8, 5, 5, 12, 5, 31), { volume, blocked: [] })!;
		expect(move[0]).toBeCloseTo(-2, 9);
		expect(move[1]).toBe(0);
		expect(move[2]).toBeCloseTo(-1, 9);
	});

	it("is none at all for what is larger than the volume", () => {
		expect(moveIntoVenue(Float64Array.of(-11, 5, 5, 11, 5, 5), { volume, blocked: [] })).toBeNull();
	});

	it("goes round what is blocked by the nearest face that has room", () => {
		const blocked = [{ min: [-10, 0, 0] as [number, number, number], max: [10, 20, 6] as [number, number, number] }];
		expect(moveIntoVenue(Float64Array.of(0, 5, 5, 3, 5, 5), { volume, blocked })).toEqual([0, 0, 1]);
	});
});
