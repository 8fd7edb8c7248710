/**
 * Whether every drone stays in the flight volume and out of blocked volumes all the way, by the hull of its path in
 * Bernstein form, halved until it is inside, outside or proven to cross.
 */
import { bernsteinMatrix, halve } from "../../maths/index.ts";
import type { Box } from "../../show/index.ts";

/** Metres: last bits of float64 at the walls of a volume, which formations may touch. */
const WALL = 1e-6;
/** Halvings after which a path that still touches a wall counts as crossing it: s is known to 1e-9. */
const DEEPEST = 30;

export interface VenueBreach {
	readonly drone: number;
	readonly at: number;
	/** Index into the blocked volumes; −1: the flight volume. */
	readonly blocked: number;
}

/** @returns the first breach by drone, or null when there is none */
export function findBreach(
	paths: Float64Array,
	degree: number,
	count: number,
	volume: Box,
	blocked: readonly Box[],
): VenueBreach | null {
	const width = degree + 1;
	const matrix = bernsteinMatrix(degree, 0, 1);
	const control = new Float64Array(3 * width);
	for (let i = 0; i < count; i++) {
		for (let axis = 0; axis < 3; axis++) {
			for (let row = 0; row < width; row++) {
				let value = 0;
				for (let k = 0; k < width; k++) value += matrix[row * width + k] * paths[(3 * i + axis) * width + k];
				control[axis * width + row] = value;
			}
		}
		const left = leaves(control, width, volume);
		if (left !== null) return { drone: i, at: left, blocked: -1 };
		for (let b = 0; b < blocked.length; b++) {
			const met = enters(control, width, blocked[b]);
			if (met !== null) return { drone: i, at: met, blocked: b };
		}
	}
	return null;
}

type Verdict = "clear" | "breach" | "open";

function judgeVolume(part: Float64Array, width: number, volume: Box): Verdict {
	let inside = true;
	for (let axis = 0; axis < 3; axis++) {
		for (let m = 0; m < width; m++) {
			const value = part[axis * width + m];
			if (value >= volume.min[axis] - WALL && value <= volume.max[axis] + WALL) continue;
			// The first and last control points are on the path itself.
			if (m === 0 || m === width - 1) return "breach";
			inside = false;
		}
	}
	return inside ? "clear" : "open";
}

function judgeBlocked(part: Float64Array, width: number, box: Box): Verdict {
	let endInside = true;
	for (let axis = 0; axis < 3; axis++) {
		let low = Infinity;
		let high = -Infinity;
		for (let m = 0; m < width; m++) {
			low = Math.min(low, part[axis * width + m]);
			high = Math.max(high, part[axis * width + m]);
		}
		if (high <= box.min[axis] + WALL || low >= box.max[axis] - WALL) return "clear";
		const end = part[axis * width];
		if (end <= box.min[axis] + WALL || end >= box.max[axis] - WALL) endInside = false;
	}
	return endInside ? "breach" : "open";
}

function leaves(control: Float64Array, width: number, volume: Box): number | null {
	return search(control, width, (part) => judgeVolume(part, width, volume));
}

function enters(control: Float64Array, width: number, box: Box): number | null {
	return search(control, width, (part) => judgeBlocked(part, width, box));
}

/** Depth first along s; returns where the first breach is. */
function search(control: Float64Array, width: number, judge: (part: Float64Array) => Verdict): number | null {
	const first = judge(control);
	if (first === "clear") return null;
	if (first === "breach") return judgeEnd(control, width, judge);
	const stack: { part: Float64Array; low: number; high: number; depth: number }[] = [
		{ part: control, low: 0, high: 1, depth: 0 },
	];
	while (stack.length > 0) {
		const entry = stack.pop();
		if (entry === undefined) break;
		const verdict = judge(entry.part);
		if (verdict === "clear") continue;
		if (verdict === "breach" || entry.depth >= DEEPEST) return entry.low;
		const left = new Float64Array(3 * width);
		const right = new Float64Array(3 * width);
		for (let axis = 0; axis < 3; axis++) halve(entry.part, axis * width, width - 1, left, right, axis * width);
		const middle = (entry.low + entry.high) / 2;
		stack.push({ part: right, low: middle, high: entry.high, depth: entry.depth + 1 });
		stack.push({ part: left, low: entry.low, high: middle, depth: entry.depth + 1 });
	}
	return null;
}

/** An end of the whole path is in breach: s = 0 if the start is, else 1. */
function judgeEnd(control: Float64Array, width: number, judge: (part: Float64Array) => Verdict): number {
	const start = new Float64Array(3 * width);
	for (let axis = 0; axis < 3; axis++) start.fill(control[axis * width], axis * width, (axis + 1) * width);
	return judge(start) === "breach" ? 0 : 1;
}
