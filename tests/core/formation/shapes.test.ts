import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
	fillFleet,
	flattenSegments,
	parsePathData,
	readPointsCsv,
	readSvg,
	sizeToSpacing,
	slotsOf,
	takeoffSlots,
} from "../../../src/core/formation/index.ts";
import { smallestGap } from "../../../src/core/maths/index.ts";
import { createShow, type Formation, type Shape } from "../../../src/core/show/index.ts";

const LIMITS = { spacing: 1.5, downwash: 2 };
const at = (shape: Shape, place: Partial<Formation["place"]> = {}): Formation => ({
	id: "f",
	name: "",
	shape,
	place: { position: [0, 40, 50], turn: 0, tilt: 0, scale: 1, ...place },
});

const SHAPES: Shape[] = [
	{ kind: "grid", columns: 5, rows: 4, layers: 3, pitch: 1 },
	{ kind: "line", count: 17, length: 5 },
	{ kind: "ring", count: 40, radius: 3 },
	{ kind: "disc", count: 90, radius: 3 },
	{ kind: "sphere", count: 120, radius: 3 },
	{ kind: "helix", count: 60, radius: 4, height: 12, turns: 3 },
	{ kind: "wave", columns: 8, rows: 5, pitch: 1, rise: 1, wavelength: 6 },
	{ kind: "text", text: "Hi!", height: 9, count: 70, style: "outline" },
	{ kind: "text", text: "OK", height: 9, count: 80, style: "filled" },
	{
		kind: "drawing",
		paths: [{ d: "M0 0H40V30H0Z M10 10h8v8h-8z", name: "box" }],
		height: 30,
		count: 60,
		style: "outline",
	},
];

describe("shapes become slots", () => {
	it.each(SHAPES.map((shape) => [shape.kind + ("style" in shape ? ` ${shape.style}` : ""), shape] as const))(
		"%s: as many as it says, on whole millimetres",
		(_name, shape) => {
			const { count, positions } = slotsOf(at(shape), LIMITS.downwash);
			const wanted = shape.kind === "grid" ? 60 : shape.kind === "wave" ? 40 : (shape as { count: number }).count;
			expect(count).toBe(wanted);
			for (const value of positions) expect(Math.abs(value * 1000 - Math.round(value * 1000))).toBeLessThan(1e-6);
		},
	);

	it("sized to spacing keep it after rounding, at any turn and tilt they are sized for", () => {
		fc.assert(
			fc.property(
				fc.constantFrom(...SHAPES),
				fc.double({ min: -180, max: 180, noNaN: true }),
				fc.constantFrom(0, 20, 45, 90),
				(shape, turn, tilt) => {
					const sized = sizeToSpacing(shape, LIMITS, 1, tilt);
					const { positions } = slotsOf(at(sized, { turn, tilt }), LIMITS.downwash);
					const gap = smallestGap(positions, LIMITS.downwash).distance;
					expect(gap).toBeGreaterThanOrEqual(LIMITS.spacing);
					// Turning and tilting spread some shapes anew in the measure of spacing, but none is grossly too large.
					expect(gap).toBeLessThan(LIMITS.spacing * 1.5);
				},
			),
			{ numRuns: 60 },
		);
	});

	it("a ring is even: every slot is as far from the next, in the measure of spacing", () => {
		const { positions } = slotsOf(at({ kind: "ring", count: 24, radius: 12 }), LIMITS.downwash);
		const steps = Array.from({ length: 24 }, (_, i) => {
			const j = (i + 1) % 24;
			return Math.hypot(
				positions[3 * i] - positions[3 * j],
				(positions[3 * i + 2] - positions[3 * j + 2]) / LIMITS.downwash,
			);
		});
		expect(Math.max(...steps) / Math.min(...steps)).toBeLessThan(1.1);
	});

	it("stand where they are placed: scale, then tilt, then turn, then move", () => {
		const [x, y, z] = slotsOf(
			at({ kind: "points", points: [[1, 0, 2]] }, { scale: 2, tilt: 90, turn: 90, position: [10, 20, 30] }),
			2,
		).positions;
		// [1,0,2] → ×2 [2,0,4] → tilt 90° about x [2,−4,0] → turn 90° about z [4,2,0] → moved.
		expect([x, y, z].map((value) => Math.round(value * 1000) / 1000)).toEqual([14, 22, 30]);
	});

	it("a text has its letters as groups, a drawing its paths", () => {
		expect([...slotsOf(at(SHAPES[7]), 2).groups.keys()].length).toBeGreaterThanOrEqual(3);
		expect([...slotsOf(at(SHAPES[9]), 2).groups.keys()]).toContain("box");
	});
});

describe("paths of drawings", () => {
	const lengthOf = (d: string): number =>
		flattenSegments(parsePathData(d), 1e-5).reduce((sum, { points, closed }) => {
			const count = points.length / 2;
			for (let i = 0; i < (closed ? count : count - 1); i++) {
				const j = (i + 1) % count;
				sum += Math.hypot(points[2 * j] - points[2 * i], points[2 * j + 1] - points[2 * i + 1]);
			}
			return sum;
		}, 0);

	it("are as long as geometry says: a circle 2πr, a parabola's arc in closed form", () => {
		expect(lengthOf("M20 10 A10 10 0 1 1 0 10 A10 10 0 1 1 20 10")).toBeCloseTo(2 * Math.PI * 10, 3);
		// y = x² from −1 to 1 as a quadratic Bézier: √5 + asinh(2)/2.
		expect(lengthOf("M-1 1 Q0 -1 1 1")).toBeCloseTo(Math.sqrt(5) + Math.asinh(2) / 2, 4);
	});

	it("come out of a file with transforms and colours; a file without any is refused in one sentence", () => {
		const drawing = readSvg(
			'<svg xmlns="http://www.w3.org/2000/svg"><g transform="translate(10 0) scale(2)" stroke="#ff8800"><path d="M0 0 L5 0"/></g></svg>',
			"boat.svg",
		);
		expect(drawing.paths).toHaveLength(1);
		expect(drawing.paths[0].colour).toBe("#ff8800");
		expect(lengthOf(drawing.paths[0].d)).toBeCloseTo(10, 9);
		expect(() => readSvg("<svg xmlns='http://www.w3.org/2000/svg'><text>hello</text></svg>", "words.svg")).toThrow(
			/words\.svg holds no path/,
		);
		expect(() => readSvg("<html></html>", "page.svg")).toThrow(/page\.svg is not an SVG file/);
	});
});

describe("points from CSV", () => {
	it("are read with and without a heading, and with colours", () => {
		const read = readPointsCsv("x,y,z,colour\n0,0,10,#ff0000\n2,0,10,#00ff00\n", "stars.csv");
		expect(read.shape.points).toEqual([
			[0, 0, 10],
			[2, 0, 10],
		]);
		expect(readPointsCsv("1,2,3\n4,5,6\n", "plain.csv").shape.points).toHaveLength(2);
	});

	it("are refused with row and column where a cell is a word", () => {
		expect(() => readPointsCsv("x,y,z\n1,2,3\n4,five,6\n", "stars.csv")).toThrow(
			/Line 3, column 2 \(y\) of stars\.csv is .*five/,
		);
	});
});

describe("a fleet larger than its picture", () => {
	const show = createShow(40);
	const picture = slotsOf(at(sizeToSpacing({ kind: "ring", count: 25, radius: 5 }, LIMITS, 1.1)), LIMITS.downwash);
	const filled = fillFleet(picture, show.fleet, show.venue);

	it("keeps its dark drones in reserve slots, spaced from all others and inside the venue", () => {
		expect(filled.all.length).toBe(3 * 40);
		expect([...filled.all.subarray(0, 75)]).toEqual([...picture.positions]);
		expect(smallestGap(filled.all, LIMITS.downwash).distance).toBeGreaterThanOrEqual(LIMITS.spacing);
		for (let i = 0; i < 120; i++) {
			expect(filled.all[i]).toBeGreaterThanOrEqual(show.venue.volume.min[i % 3]);
			expect(filled.all[i]).toBeLessThanOrEqual(show.venue.volume.max[i % 3]);
		}
	});

	it("never between the lit ones and the audience", () => {
		const nearest = Math.min(...picture.positions.filter((_, k) => k % 3 === 1));
		for (let i = 25; i < 40; i++) {
			const before = filled.all[3 * i + 1] < nearest - 1e-9;
			const [xs, zs] = [0, 2].map((axis) => picture.positions.filter((_, k) => k % 3 === axis));
			const inside =
				filled.all[3 * i] > Math.min(...xs) &&
				filled.all[3 * i] < Math.max(...xs) &&
				filled.all[3 * i + 2] > Math.min(...zs) &&
				filled.all[3 * i + 2] < Math.max(...zs);
			expect(before && inside).toBe(false);
		}
	});

	it("says so where a picture has more slots than the fleet has drones", () => {
		expect(() => fillFleet(picture, { ...show.fleet, count: 10 }, show.venue)).toThrow(/25.*10/);
	});

	it("starts from a grid on the ground at the spacing", () => {
		const ground = takeoffSlots({ ...show, formations: { byId: {}, order: [] } });
		expect(ground.length).toBe(120);
		expect(smallestGap(ground, 1).distance).toBeGreaterThanOrEqual(LIMITS.spacing);
		for (let i = 0; i < 40; i++) expect(ground[3 * i + 2]).toBe(0);
	});
});
