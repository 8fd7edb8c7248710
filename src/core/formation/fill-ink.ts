import type { Ink, InkSlot } from "./ink.ts";
import { createNearness, createPointGrid, type PointGrid } from "./nearness.ts";
import { spreadOutline } from "./outline.ts";

/**
 * Slots spread over the inside of a picture: a hexagonal lattice cut out by the outlines (nonzero rule; later inks lie
 * over earlier ones), then relaxed until each slot stands in the middle of the area nearest to it (Lloyd 1982), which
 * fits the lattice into strokes and corners. Inks without an inside (open lines) are drawn along instead.
 */

/** Samples of the inside for each slot: enough for centres good to about a tenth of the distance between slots. */
const SAMPLES = 32;

/** Rounds of relaxation for small pictures; large ones are nearly all lattice and need fewer. */
const ROUNDS = 24;

/** An inside smaller than this share of the picture's box is none. */
const NO_INSIDE = 1e-6;

interface Sample {
	readonly x: number;
	readonly y: number;
	readonly ink: number;
}

/** @param share what a metre upright counts in the measure */
export function fillInk(inks: readonly Ink[], count: number, share: number): InkSlot[] {
	const scaled = inks.map((ink) =>
		ink.contours.map(({ points }) => points.map((v, i) => (i % 2 === 0 ? v : v * share))),
	);
	const box = boxAbout(scaled);
	const coarse = sampleInside(scaled, box, Math.sqrt((box.width * box.height) / 40_000) || 1);
	const solid = new Set(coarse.samples.map(({ ink }) => ink));
	const lines = inks.flatMap((ink, i) => (solid.has(i) ? [] : ink.contours.map(() => i)));
	const area = coarse.samples.length * coarse.cell ** 2;
	if (solid.size === 0 || area < NO_INSIDE * Math.max(box.width, box.height) ** 2)
		return spreadOutline(inks, count, share);

	// Distance between slots so that area and lines together take `count`: area·2/(√3·p²) + length/p = count.
	const length = lengthOf(scaled, new Set(lines));
	const weight = (2 * area) / Math.sqrt(3);
	const pitch = (length + Math.sqrt(length * length + 4 * count * weight)) / (2 * count);
	const onLines = Math.min(count - 1, Math.round(length / pitch));
	const drawn =
		onLines > 0
			? spreadOutline(
					inks.map((ink, i) => (solid.has(i) ? { ...ink, contours: [] } : ink)),
					onLines,
					share,
				)
			: [];
	const cell = Math.sqrt(area / (SAMPLES * (count - drawn.length)));
	const taken = createNearness(pitch);
	for (const { x, y } of drawn) taken.add(x, y * share);
	const inside = sampleInside(scaled, box, cell).samples;
	const free = inside.filter(({ x, y }) => !taken.any(x, y, 0.8 * pitch));
	const samples = free.length >= count - drawn.length ? free : inside;
	const filled = relax(samples, count - drawn.length, cell);
	const slots = [...drawn, ...filled.map(({ x, y, ink }) => ({ x, y: y / share, ink }))];
	return slots.sort((a, b) => a.ink - b.ink || a.x - b.x || a.y - b.y);
}

interface FlatBox {
	readonly left: number;
	readonly bottom: number;
	readonly width: number;
	readonly height: number;
}

function boxAbout(inks: readonly (readonly Float64Array[])[]): FlatBox {
	let [left, bottom, right, top] = [Infinity, Infinity, -Infinity, -Infinity];
	for (const points of inks.flat())
		for (let i = 0; i < points.length; i += 2) {
			left = Math.min(left, points[i]);
			right = Math.max(right, points[i]);
			bottom = Math.min(bottom, points[i + 1]);
			top = Math.max(top, points[i + 1]);
		}
	return { left, bottom, width: right - left, height: top - bottom };
}

function lengthOf(inks: readonly (readonly Float64Array[])[], which: ReadonlySet<number>): number {
	let sum = 0;
	for (const i of which)
		for (const points of inks[i])
			for (let k = 2; k < points.length; k += 2)
				sum += Math.hypot(points[k] - points[k - 2], points[k + 1] - points[k - 1]);
	return sum;
}

/** Middles of square cells that lie inside an ink, row by row; the last ink that covers a cell owns it. */
function sampleInside(
	inks: readonly (readonly Float64Array[])[],
	box: FlatBox,
	cell: number,
): { samples: Sample[]; cell: number } {
	const columns = Math.max(1, Math.ceil(box.width / cell));
	const rows = Math.max(1, Math.ceil(box.height / cell));
	const owner = new Int32Array(columns * rows).fill(-1);
	inks.forEach((contours, ink) => {
		// For each row: where an outline crosses its middle line, and which way.
		const crossings: { x: number; way: number }[][] = Array.from({ length: rows }, () => []);
		for (const points of contours)
			for (let i = 0; i < points.length; i += 2) {
				const k = (i + 2) % points.length;
				const [x0, y0, x1, y1] = [points[i], points[i + 1], points[k], points[k + 1]];
				if (y0 === y1) continue;
				const first = Math.max(0, Math.ceil((Math.min(y0, y1) - box.bottom) / cell - 0.5));
				for (let row = first; row < rows; row++) {
					const y = box.bottom + (row + 0.5) * cell;
					if (y >= Math.max(y0, y1)) break;
					if (y < Math.min(y0, y1)) continue;
					crossings[row].push({ x: x0 + ((y - y0) / (y1 - y0)) * (x1 - x0), way: y1 > y0 ? 1 : -1 });
				}
			}
		crossings.forEach((row, r) => {
			row.sort((a, b) => a.x - b.x);
			let winding = 0;
			for (let i = 0; i + 1 < row.length; i++) {
				winding += row[i].way;
				if (winding === 0) continue;
				const from = Math.max(0, Math.ceil((row[i].x - box.left) / cell - 0.5));
				for (let c = from; c < columns && box.left + (c + 0.5) * cell < row[i + 1].x; c++) owner[r * columns + c] = ink;
			}
		});
	});
	const samples: Sample[] = [];
	for (let r = 0; r < rows; r++)
		for (let c = 0; c < columns; c++) {
			const ink = owner[r * columns + c];
			if (ink >= 0) samples.push({ x: box.left + (c + 0.5) * cell, y: box.bottom + (r + 0.5) * cell, ink });
		}
	return { samples, cell };
}

/** Lattice points on samples, moved to the middle of what is nearest to each, then apart, round after round. */
function relax(samples: readonly Sample[], count: number, cell: number): Sample[] {
	const seeds = seedLattice(samples, count, cell);
	const points = new Float64Array(2 * count);
	seeds.forEach(({ x, y }, i) => {
		points.set([x, y], 2 * i);
	});
	const rounds = Math.max(5, Math.min(ROUNDS, Math.ceil((ROUNDS * 1000) / count)));
	const pitch = cell * Math.sqrt(samples.length / count);
	const sums = new Float64Array(3 * count);
	const spots = createPointGrid(Float64Array.from(samples.flatMap(({ x, y }) => [x, y])), 2 * cell);
	for (let round = 0; round < rounds; round++) {
		const grid = createPointGrid(points, pitch);
		sums.fill(0);
		for (const { x, y } of samples) {
			const seed = grid.nearest(x, y);
			sums[3 * seed] += x;
			sums[3 * seed + 1] += y;
			sums[3 * seed + 2]++;
		}
		for (let i = 0; i < count; i++) {
			if (sums[3 * i + 2] === 0) continue;
			points[2 * i] = sums[3 * i] / sums[3 * i + 2];
			points[2 * i + 1] = sums[3 * i + 1] / sums[3 * i + 2];
		}
	}
	for (let round = 0; round < rounds; round++) pushApart(points, pitch, samples, spots, cell);
	return Array.from({ length: count }, (_, i) => {
		const [x, y] = [points[2 * i], points[2 * i + 1]];
		const spot = samples[spots.nearest(x, y)];
		// A middle may lie outside a bent stroke: there the nearest sample is taken itself.
		return Math.hypot(spot.x - x, spot.y - y) <= cell ? { x, y, ink: spot.ink } : spot;
	});
}

/**
 * The nearest pairs decide how large the picture must be flown, and middles alone leave some of them close where a
 * stroke is just wider than one row: pairs under the even distance move apart by half of what they lack, inside.
 */
function pushApart(
	points: Float64Array,
	pitch: number,
	samples: readonly Sample[],
	spots: PointGrid,
	cell: number,
): void {
	const wanted = pitch;
	const push = new Float64Array(points.length);
	createPointGrid(points, wanted).pairs((a, b) => {
		const dx = points[2 * b] - points[2 * a];
		const dy = points[2 * b + 1] - points[2 * a + 1];
		const distance = Math.hypot(dx, dy);
		if (distance >= wanted || distance === 0) return;
		const share = (0.25 * (wanted - distance)) / distance;
		push[2 * a] -= dx * share;
		push[2 * a + 1] -= dy * share;
		push[2 * b] += dx * share;
		push[2 * b + 1] += dy * share;
	});
	for (let i = 0; i < points.length; i += 2) {
		if (push[i] === 0 && push[i + 1] === 0) continue;
		const [x, y] = [points[i] + push[i], points[i + 1] + push[i + 1]];
		const spot = samples[spots.nearest(x, y)];
		const inside = Math.hypot(spot.x - x, spot.y - y) <= cell;
		points[i] = inside ? x : spot.x;
		points[i + 1] = inside ? y : spot.y;
	}
}

/** Exactly `count` samples nearest to the points of a hexagonal lattice, left out evenly where it has more. */
function seedLattice(samples: readonly Sample[], count: number, cell: number): Sample[] {
	const pick = (pitch: number): Sample[] => {
		const taken = new Map<number, { sample: Sample; distance: number }>();
		const row = (pitch * Math.sqrt(3)) / 2;
		for (const sample of samples) {
			// The lattice point nearest to this sample, among the two nearest rows.
			const low = Math.floor(sample.y / row);
			for (const r of [low, low + 1]) {
				const shift = r % 2 === 0 ? 0 : pitch / 2;
				const c = Math.round((sample.x - shift) / pitch);
				const distance = Math.hypot(sample.x - c * pitch - shift, sample.y - r * row);
				if (distance > cell) continue;
				const key = r * 67108864 + c;
				const held = taken.get(key);
				if (held === undefined || distance < held.distance) taken.set(key, { sample, distance });
			}
		}
		return [...taken.values()].map(({ sample }) => sample);
	};
	const even = cell * Math.sqrt((2 * samples.length) / (Math.sqrt(3) * count));
	let [low, high] = [even / 3, even * 1.5];
	let seeds = pick(low);
	for (let i = 0; i < 12; i++) {
		const middle = (low + high) / 2;
		const found = pick(middle);
		if (found.length >= count) {
			low = middle;
			seeds = found;
		} else high = middle;
	}
	// Pictures of a few samples can't be met by a lattice: then samples are taken evenly in their order.
	const source = seeds.length >= count ? seeds : samples;
	return Array.from({ length: count }, (_, i) => source[Math.floor(((i + 0.5) * source.length) / count)]);
}
