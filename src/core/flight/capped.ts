import { type Assignment, assign } from "./assign/assign.ts";
import type { Allowed } from "./assign/sparse-arcs.ts";
import { straightLaw } from "./law/fleet-law.ts";
import { straightTime } from "./law/straight-time.ts";
import { lawDuration } from "./law/time-law.ts";
import type { LegProblem } from "./leg-problem.ts";
import { scaledMillimetres } from "./measure.ts";
import { straightPaths } from "./paths/polynomial-paths.ts";
import { withinSharedLaw } from "./shared-law.ts";

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
/** On one law the flights of the best cap may take this much longer than the bound before a shared law is sought. */
const TOGETHER = 1.03;
const HALVINGS = 6;
/**
 * Above this many drones the bound is the larger of the nearest flights alone, the first cap that can be kept is the only
 * one tried, and no shared law is sought: each is another assignment, and would take too long.
 */
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
	const candidate = (assignment: Assignment, cap: number | null): Candidate => {
		let longest = 0;
		for (let i = 0; i < count; i++) longest = Math.max(longest, time(i, assignment.target[i]));
		const straight = straightPaths(from, to, assignment.target);
		return { assignment, cap, longest, together: lawDuration(straightLaw(straight, count, limits, problem.timeLaw)) };
	};
	const free = candidate(solved, null);
	let low = nearestFlights(solved.target, time);
	if (free.longest <= ENOUGH * low || count < 2) return { candidates: [free], bound: Math.min(low, free.longest) };
	const within = (allowed: Allowed): Assignment | null => assign(scaledFrom, scaledTo, allowed, solved);
	const noLongerThan = (limit: number): Assignment | null => within((i, j) => time(i, j) <= limit + 1e-9);
	if (count <= MANY) {
		let high = free.longest;
		for (let k = 0; k < HALVINGS && high > 1.004 * low; k++) {
			const middle = Math.sqrt(low * high);
			const found = noLongerThan(middle);
			if (found === null) low = middle;
			else high = candidate(found, null).longest;
		}
	}
	const candidates: Candidate[] = [free];
	for (const cap of CAPS) {
		if (cap * low >= free.longest) break;
		const found = noLongerThan(cap * low);
		if (found === null) continue;
		candidates.push(candidate(found, cap));
		if (count > MANY) break;
	}
	if (count <= MANY && Math.min(...candidates.map(({ together }) => together)) > TOGETHER * low) {
		const found = withinSharedLaw(problem, low, within);
		if (found !== null) candidates.push(candidate(found.assignment, found.share));
	}
	candidates.sort((a, b) => a.together - b.together);
	return { candidates, bound: low };
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
