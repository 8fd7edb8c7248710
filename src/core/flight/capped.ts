import { type Assignment, assign } from "./assign/assign.ts";
import { straightLaw } from "./law/fleet-law.ts";
import { sCurveTime, straightTime } from "./law/straight-time.ts";
import { lawDuration } from "./law/time-law.ts";
import type { LegProblem } from "./leg-problem.ts";
import { scaledMillimetres } from "./measure.ts";
import { straightPaths } from "./paths/polynomial-paths.ts";

/** An assignment that no drone pays for with a flight much longer than the longest one must be. */
export interface Candidate {
	readonly assignment: Assignment;
	/** Share over the straight-line bound that every flight was held to; null: uncapped, so the √2 guarantee holds. */
	readonly cap: number | null;
	/** Seconds: its longest straight flight. */
	readonly longest: number;
	/** Seconds: all its flights straight on one law. */
	readonly together: number;
}

export interface Choice {
	/** Shortest longest flight first. */
	readonly candidates: Candidate[];
	/** Seconds: no assignment has a shorter longest straight flight. */
	readonly bound: number;
}

/** Shares over the bound that are tried; sum of squares alone is 1.08 (median) and up to 3.3 (text to text). */
const CAPS = [1.03, 1.15, 1.35];
/** The uncapped answer is good enough below this share over the bound. */
const ENOUGH = 1.02;
const HALVINGS = 6;
/** Above this many drones the bound is the larger of the nearest flights alone: bisecting would take too long. */
const MANY = 2500;

/**
 * The least sum of squares, and the least sums of squares under caps on the longest flight (forbidden arcs in the same
 * solver), so that the planner has a choice.
 */
export function chooseAssignments(problem: LegProblem): Choice {
	const { from, to, limits } = problem;
	const count = from.length / 3;
	const scaledFrom = scaledMillimetres(from, limits.downwash);
	const scaledTo = scaledMillimetres(to, limits.downwash);
	const solved = assign(scaledFrom, scaledTo);
	if (solved === null) throw new Error("an assignment without forbidden pairs always exists");
	const time = (i: number, j: number): number =>
		straightTime(to[3 * j] - from[3 * i], to[3 * j + 1] - from[3 * i + 1], to[3 * j + 2] - from[3 * i + 2], limits);
	const longestOf = (target: Int32Array): number => {
		let longest = 0;
		for (let i = 0; i < count; i++) longest = Math.max(longest, time(i, target[i]));
		return longest;
	};
	const togetherOf = (target: Int32Array): number =>
		lawDuration(straightLaw(straightPaths(from, to, target), count, limits, problem.timeLaw));
	const free: Candidate = {
		assignment: solved,
		cap: null,
		longest: longestOf(solved.target),
		together: togetherOf(solved.target),
	};
	let low = nearestFlights(solved.target, time);
	if (free.longest <= ENOUGH * low || count < 2) return { candidates: [free], bound: Math.min(low, free.longest) };
	const within = (limit: number): Assignment | null =>
		assign(scaledFrom, scaledTo, (i, j) => time(i, j) <= limit + 1e-9, solved);
	if (count <= MANY) {
		let high = free.longest;
		for (let k = 0; k < HALVINGS && high > 1.004 * low; k++) {
			const middle = Math.sqrt(low * high);
			const found = within(middle);
			if (found === null) low = middle;
			else high = longestOf(found.target);
		}
	}
	const candidates: Candidate[] = [free];
	if (free.longest > ENOUGH * low) {
		for (const cap of CAPS) {
			const limit = cap * low;
			if (limit >= free.longest) break;
			const found = within(limit);
			if (found !== null)
				candidates.push({
					assignment: found,
					cap,
					longest: longestOf(found.target),
					together: togetherOf(found.target),
				});
		}
	}
	if (Math.min(...candidates.map((c) => c.together)) > 1.03 * low) {
		const shared = withinSharedLaw(problem, low, (allowed) => assign(scaledFrom, scaledTo, allowed, solved));
		if (shared !== null)
			candidates.push({
				assignment: shared,
				cap: 1,
				longest: longestOf(shared.target),
				together: togetherOf(shared.target),
			});
	}
	candidates.sort((a, b) => a.together - b.together);
	return { candidates, bound: low };
}

/** Shares over the bound that a shared law is tried at, and how many shapes of it. */
const SHARED = [1.015, 1.03, 1.05, 1.09];
const SHAPES = 9;

/**
 * On one law a climb that needs speed and a long flight that needs acceleration hold each other up, though each alone is
 * within the cap. So flights are held to what one law of a given duration allows: all those that it is fast enough for and
 * not too brisk for; from a law that cruises most of the way to one that never does.
 */
function withinSharedLaw(
	{ from, to, limits }: LegProblem,
	bound: number,
	solve: (allowed: (i: number, j: number) => boolean) => Assignment | null,
): Assignment | null {
	const count = from.length / 3;
	for (const share of SHARED) {
		const time = share * bound;
		for (let k = 0; k < SHAPES; k++) {
			// Top rate of s: 1/T would never stop to accelerate, 2/T never cruise.
			const speed = (1.1 + (0.85 * k) / (SHAPES - 1)) / time;
			let [low, high] = [1e-6, 1e6];
			const jolt = limits.jerk / limits.acceleration;
			for (let step = 0; step < 60; step++) {
				const middle = Math.sqrt(low * high);
				if (sCurveTime(1, { speed, acceleration: middle, jerk: middle * jolt }) > time) low = middle;
				else high = middle;
			}
			if (high > 1e5) continue;
			const far = limits.acceleration / high;
			const allowed = (i: number, j: number): boolean => {
				const [x, y, z] = [to[3 * j] - from[3 * i], to[3 * j + 1] - from[3 * i + 1], to[3 * j + 2] - from[3 * i + 2]];
				const level = x * x + y * y;
				return (
					level + z * z <= far * far &&
					level * speed * speed <= limits.horizontal * limits.horizontal &&
					z * speed <= limits.climb &&
					-z * speed <= limits.descent
				);
			};
			if (!everyoneHasOne(count, allowed)) continue;
			const found = solve(allowed);
			if (found !== null) return found;
		}
	}
	return null;
}

function everyoneHasOne(count: number, allowed: (i: number, j: number) => boolean): boolean {
	const columns = new Uint8Array(count);
	for (let i = 0; i < count; i++) {
		let any = false;
		for (let j = 0; j < count; j++) {
			if (!allowed(i, j)) continue;
			any = true;
			columns[j] = 1;
		}
		if (!any) return false;
	}
	return columns.every((column) => column === 1);
}

/** Seconds: some drone must fly at least this long, whoever goes where; no more than the longest flight of `target`. */
function nearestFlights(target: Int32Array, time: (i: number, j: number) => number): number {
	const count = target.length;
	const own = Float64Array.from({ length: count }, (_, i) => time(i, target[i]));
	const order = Int32Array.from({ length: count }, (_, i) => i).sort((p, q) => own[q] - own[p] || p - q);
	let bound = 0;
	// Only a row (or column) none of whose flights is within the bound raises it: longest first, few need a look at all.
	for (const i of order) {
		if (own[i] <= bound) break;
		let row = own[i];
		for (let j = 0; j < count && row > bound; j++) row = Math.min(row, time(i, j));
		bound = Math.max(bound, row);
		let column = own[i];
		for (let k = 0; k < count && column > bound; k++) column = Math.min(column, time(k, target[i]));
		bound = Math.max(bound, column);
	}
	return bound;
}
