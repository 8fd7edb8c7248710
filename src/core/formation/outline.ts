import { turnAt } from "./flatten.ts";
import type { Ink, InkSlot } from "./ink.ts";
import { createNearness } from "./nearness.ts";

/**
 * Slots along the outlines of a picture. All outlines share one step, so each gets its fair share by length; corners
 * keep a slot wherever they are further apart than the step allows for; where outlines run closer together than the
 * step, every other slot gives way, so that a thin stroke doesn't make the whole picture larger.
 */

/** Shortest stretch between two corners that both keep their slot, in steps. */
const SHORTEST = 0.75;

/** Nearest that two slots of the outline may come, in steps. */
const NEAREST = 0.7;

/** One contour with its length run up in the measure. */
interface Run {
	readonly ink: number;
	/** x y in the measure: y multiplied by the upright share. */
	readonly points: Float64Array;
	readonly closed: boolean;
	/** Length from the first point to each, and to the end: one more entry than points where closed. */
	readonly reached: Float64Array;
	readonly length: number;
	/** Indices of points that are corners, and how sharp each is. */
	readonly corners: readonly { readonly at: number; readonly sharp: number }[];
}

/** A stretch of a run between two kept corners, cut into `steps`. */
interface Stretch {
	readonly run: number;
	readonly from: number;
	readonly to: number;
	/** Whether a slot stands on `from` because it is a corner. */
	readonly corner: boolean;
	/** Whether its end gets a slot of its own: the last stretch of an open run. */
	readonly last: boolean;
	steps: number;
}

interface Candidate {
	readonly run: number;
	readonly x: number;
	readonly y: number;
	readonly corner: boolean;
}

/** @param share what a metre upright counts in the measure */
export function spreadOutline(inks: readonly Ink[], count: number, share: number): InkSlot[] {
	const runs = createRuns(inks, share);
	// Fewer slots than outlines: the longest are drawn.
	const drawn =
		runs.length <= count
			? runs
			: [...runs.keys()]
					.sort((a, b) => runs[b].length - runs[a].length || a - b)
					.slice(0, count)
					.sort((a, b) => a - b)
					.map((i) => runs[i]);
	const total = drawn.reduce((sum, run) => sum + run.length, 0);
	let wanted = count;
	let kept: Candidate[] = [];
	for (let round = 0; round < 60; round++) {
		const all = placeAlong(drawn, wanted, total / wanted);
		kept = thin(all, (NEAREST * total) / wanted);
		if (kept.length >= count) break;
		if (round === 59) kept = placeAlong(drawn, count, total / count);
		wanted += Math.max(1, count - kept.length);
	}
	return dropTightest(kept, count).map(({ run, x, y }) => ({ x, y: y / share, ink: drawn[run].ink }));
}

function createRuns(inks: readonly Ink[], share: number): Run[] {
	const runs: Run[] = [];
	inks.forEach((ink, index) => {
		for (const contour of ink.contours) {
			const points = contour.points.map((value, i) => (i % 2 === 0 ? value : value * share));
			const count = points.length / 2;
			const reached = new Float64Array(contour.closed ? count + 1 : count);
			for (let i = 1; i < reached.length; i++) {
				const [a, b] = [2 * (i - 1), 2 * (i % count)];
				reached[i] = reached[i - 1] + Math.hypot(points[b] - points[a], points[b + 1] - points[a + 1]);
			}
			const corners: { at: number; sharp: number }[] = [];
			for (let i = 0; i < count; i++)
				if (contour.corners[i] === 1) {
					const end = !contour.closed && (i === 0 || i === count - 1);
					corners.push({ at: reached[i], sharp: end ? 4 : turnAt(contour.points, i) });
				}
			const length = reached[reached.length - 1];
			if (length > 0) runs.push({ ink: index, points, closed: contour.closed, reached, length, corners });
		}
	});
	return runs;
}

/** Exactly `count` slots along all runs together, as near to one step as corners allow. */
function placeAlong(runs: readonly Run[], count: number, evenStep: number): Candidate[] {
	let [low, high] = [evenStep / 4, evenStep * 4];
	for (let i = 0; i < 40; i++) {
		const step = Math.sqrt(low * high);
		if (slotsIn(cutRuns(runs, step)) > count) low = step;
		else high = step;
	}
	const stretches = cutRuns(runs, high);
	// What the step can't settle (equal stretches all change at once) is settled one slot at a time, widest step first.
	let have = slotsIn(stretches);
	while (have < count) {
		let widest = stretches[0];
		for (const stretch of stretches) if (stepOf(stretch) > stepOf(widest) + 1e-12) widest = stretch;
		widest.steps++;
		have++;
	}
	while (have > count) {
		let tightest: Stretch | null = null;
		for (const stretch of stretches)
			if (stretch.steps > 1 && (tightest === null || stepOf(stretch) < stepOf(tightest) - 1e-12)) tightest = stretch;
		if (tightest === null) break;
		tightest.steps--;
		have--;
	}
	const out: Candidate[] = [];
	for (const { run, from, to, corner, last, steps } of stretches) {
		const put = (at: number, isCorner: boolean): void => {
			const [x, y] = pointAt(runs[run], at);
			out.push({ run, x, y, corner: isCorner });
		};
		// An open run too short for two slots has one in its middle.
		if (steps === 0) put((from + to) / 2, false);
		for (let i = 0; i < steps; i++) put(from + ((to - from) * i) / steps, corner && i === 0);
		if (last && steps > 0) put(to, true);
	}
	return out.slice(0, count);
}

function stepOf(stretch: Stretch): number {
	return stretch.steps === 0 ? (stretch.to - stretch.from) / 2 : (stretch.to - stretch.from) / stretch.steps;
}

function slotsIn(stretches: readonly Stretch[]): number {
	return stretches.reduce((sum, { steps, last }) => sum + (steps === 0 ? 1 : steps + (last ? 1 : 0)), 0);
}

function cutRuns(runs: readonly Run[], step: number): Stretch[] {
	const stretches: Stretch[] = [];
	runs.forEach((run, index) => {
		const steps = (length: number): number => Math.max(1, Math.floor(length / step + 1 - SHORTEST));
		if (!run.closed && run.length < SHORTEST * step) {
			stretches.push({ run: index, from: 0, to: run.length, corner: false, last: true, steps: 0 });
			return;
		}
		const kept = keepCorners(run, SHORTEST * step);
		if (kept.length === 0) {
			stretches.push({ run: index, from: 0, to: run.length, corner: false, last: false, steps: steps(run.length) });
			return;
		}
		const ends = run.closed ? kept.length : kept.length - 1;
		for (let i = 0; i < ends; i++) {
			const from = kept[i];
			const to = i + 1 < kept.length ? kept[i + 1] : kept[0] + run.length;
			const last = !run.closed && i === ends - 1;
			stretches.push({ run: index, from, to, corner: true, last, steps: steps(to - from) });
		}
	});
	return stretches;
}

/** Corners at least `apart` from each other, the sharper of two that are nearer; ends of an open run always. */
function keepCorners(run: Run, apart: number): number[] {
	const kept: { at: number; sharp: number }[] = [];
	for (const corner of run.corners) {
		const before = kept[kept.length - 1];
		if (before === undefined || corner.at - before.at >= apart) kept.push(corner);
		else if (corner.sharp > before.sharp) kept[kept.length - 1] = corner;
	}
	const around = (): number => kept[0].at + run.length - kept[kept.length - 1].at;
	while (run.closed && kept.length > 1 && around() < apart) {
		if (kept[0].sharp > kept[kept.length - 1].sharp) kept.pop();
		else kept.shift();
	}
	return kept.map(({ at }) => at);
}

function pointAt(run: Run, at: number): [number, number] {
	const { reached, points } = run;
	const wanted = run.closed ? at % run.length : Math.min(at, run.length);
	let low = 0;
	let high = reached.length - 1;
	while (high - low > 1) {
		const middle = (low + high) >> 1;
		if (reached[middle] <= wanted) low = middle;
		else high = middle;
	}
	const [a, b] = [2 * low, 2 * (high % (points.length / 2))];
	const span = reached[high] - reached[low];
	const part = span > 0 ? (wanted - reached[low]) / span : 0;
	return [points[a] + (points[b] - points[a]) * part, points[a + 1] + (points[b + 1] - points[a + 1]) * part];
}

/** Leaves out what stands nearer than `apart` to a slot that is kept; corners are kept first. */
function thin(all: readonly Candidate[], apart: number): Candidate[] {
	const near = createNearness(apart);
	const keep = new Uint8Array(all.length);
	for (const corners of [true, false])
		all.forEach((slot, i) => {
			if (slot.corner !== corners || near.any(slot.x, slot.y, apart)) return;
			near.add(slot.x, slot.y);
			keep[i] = 1;
		});
	return all.filter((_, i) => keep[i] === 1);
}

/** Takes away those with the nearest neighbour until `count` are left. */
function dropTightest(slots: readonly Candidate[], count: number): Candidate[] {
	const left = [...slots];
	while (left.length > count) {
		let tightest = left.length - 1;
		let best = Infinity;
		for (let i = 1; i < left.length; i++) {
			const distance = Math.hypot(left[i].x - left[i - 1].x, left[i].y - left[i - 1].y);
			if (!left[i].corner && distance < best) {
				best = distance;
				tightest = i;
			}
		}
		left.splice(tightest, 1);
	}
	return left;
}
