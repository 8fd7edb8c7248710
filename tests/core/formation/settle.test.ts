import { describe, expect, it } from "vitest";
import { readSvg, settleShape, slotsOf } from "../../../src/core/formation/index.ts";
import { smallestGap } from "../../../src/core/maths/index.ts";
import { createShow, type Shape } from "../../../src/core/show/index.ts";

const { fleet, venue } = createShow(100);
const { limits } = fleet;
const star =
	'<svg xmlns="http://www.w3.org/2000/svg"><path d="M50 0L61 35H98L68 57L79 91L50 70L21 91L32 57L2 35H39Z" stroke="#fff"/></svg>';
const SHAPES: Shape[] = [
	readSvg(star, "star.svg", { count: 100 }),
	{ kind: "text", text: "LAMPS", height: 3, count: 100, style: "outline" },
	{ kind: "text", text: "LAMPS", height: 300, count: 100, style: "filled" },
	{ kind: "ring", count: 100, radius: 1 },
	{ kind: "sphere", count: 100, radius: 200 },
];
const settled = (shape: Shape, where = venue) => {
	const answer = settleShape(shape, limits, where, "star");
	return { ...answer, slots: slotsOf({ id: "s", name: "", shape: answer.shape, place: answer.place }).positions };
};

describe("a picture that comes in", () => {
	it.each(SHAPES)("keeps the spacing and stands in the flight volume ($kind)", (shape) => {
		const { slots, note } = settled(shape);
		expect(smallestGap(slots, limits.downwash).distance).toBeGreaterThanOrEqual(limits.spacing);
		expect(smallestGap(slots, limits.downwash).distance).toBeLessThan(1.25 * limits.spacing);
		for (let k = 0; k < slots.length; k++) {
			expect(slots[k]).toBeGreaterThanOrEqual(venue.volume.min[k % 3]);
			expect(slots[k]).toBeLessThanOrEqual(venue.volume.max[k % 3]);
		}
		expect(note).toMatch(/^star is [\d.]+ m wide, [\d.]+ m deep and [\d.]+ m high, sized so that its slots stand/);
	});

	it("is made to fit a small venue, and is said to be too close there", () => {
		const volume = { min: [-5, 0, 0] as [number, number, number], max: [5, 40, 30] as [number, number, number] };
		const { slots, note } = settled(SHAPES[0], { ...venue, volume });
		const xs = slots.filter((_, k) => k % 3 === 0);
		expect(Math.max(...xs) - Math.min(...xs)).toBeLessThanOrEqual(10);
		expect(Math.max(...xs) - Math.min(...xs)).toBeGreaterThan(9.9);
		expect(note).toContain("as the flight volume allows, but its closest slots stand");
	});

	it("keeps the metres of points, and says where they are too close", () => {
		const points: Shape = {
			kind: "points",
			points: [
				[0, 30, 20],
				[0.5, 30, 20],
				[300, 30, 20],
			],
		};
		const { shape, place, note } = settled({ ...points, points: points.points.slice(0, 2) });
		expect(shape).toEqual({ ...points, points: points.points.slice(0, 2) });
		expect(place.position).toEqual([0, 0, 0]);
		expect(note).toContain("as the file has it, but its closest slots stand 0.50 m apart");
		expect(settled(points).place.position).toEqual([0, 0, 0]);
	});

	it("comes in even where two slots stand on one place", () => {
		const twice = '<svg xmlns="http://www.w3.org/2000/svg"><path d="M0 0H9"/><path d="M0 0H9"/></svg>';
		expect(settled(readSvg(twice, "twice.svg", { count: 4 })).note).toMatch(/star is/);
	});

	it("stands clear of what is blocked", () => {
		const blocked = [
			{ min: [-100, 20, 0] as [number, number, number], max: [100, 40, 45] as [number, number, number] },
		];
		const { slots } = settled(SHAPES[0], { ...venue, blocked });
		for (let k = 0; k < slots.length; k += 3) {
			const inside = [0, 1, 2].every(
				(axis) => slots[k + axis] > blocked[0].min[axis] && slots[k + axis] < blocked[0].max[axis],
			);
			expect(inside).toBe(false);
		}
	});
});
