import { GAP_TOLERANCE, TIGHT_SHARE } from "../units/index.ts";
import { type Candidate, chooseAssignments } from "./capped.ts";
import { lawForPaths } from "./law/fleet-law.ts";
import { straightTime } from "./law/straight-time.ts";
import { dilate, lawDuration } from "./law/time-law.ts";
import { verticalLaw } from "./law/vertical-law.ts";
import type { LegProblem, PlanProgress } from "./leg-problem.ts";
import { partPairs } from "./parting/part-pairs.ts";
import { guaranteedPaths } from "./paths/guaranteed.ts";
import { type Paths, straightPaths } from "./paths/polynomial-paths.ts";
import type { Plan, TimeLaw } from "./plan.ts";
import { peaksOfFlight } from "./proof/peaks.ts";
import { limitRatio } from "./proof/prove-plan.ts";
import { smallestSeparation } from "./proof/separation.ts";
import { findBreach } from "./proof/venue.ts";

/** Rises whenever the same problem would give another plan. */
export const PLANNER_VERSION = 5;

/** A plan this near to the straight-line bound is not bettered by further tries. */
const ENOUGH = 1.02;
/** Nor is one for which another assignment, even straight, would save less than this share. */
const WORTH = 1.1;
/** Assignments that are tried, best first. */
const TRIES = 3;
/** Times the straight flights' own duration at which parting is given up. */
const LATEST = 3;
const LOOKS = 300;
/** Shares of the spacing from which more gap is worth having, and of the duration that it may cost. */
const LEAST_ROOM = 1.02;
const ROOM_COSTS = 1.01;

/** What a candidate came to. */
interface Outcome {
	readonly candidate: Candidate;
	readonly paths: Paths;
	readonly law: TimeLaw;
	readonly method: string;
	/** Keeps spacing and venue. */
	readonly clear: boolean;
}

/** Plans one leg. The same problem gives the same plan, on any number of workers. */
export function planLeg(problem: LegProblem, onProgress?: PlanProgress): Plan {
	if (problem.target !== null) return planForced(problem, problem.target);
	onProgress?.(0, "assigning");
	const { candidates, bound } = chooseAssignments(problem);
	const ends = endGap(problem);
	let best: Outcome | null = null as Outcome | null;
	for (let k = 0; k < Math.min(TRIES, candidates.length); k++) {
		const known: number = best?.clear ? lawDuration(best.law) : Infinity;
		if (known <= Math.max(ENOUGH * bound, WORTH * candidates[k].together)) break;
		onProgress?.(0.3 + (0.6 * k) / TRIES, "parting near pairs");
		const found = partedOutcome(problem, candidates[k], bound, problem.limits.spacing, ends);
		if (found !== null) best = better(best, found);
	}
	const free = candidates.find(({ cap }) => cap === null);
	if (free && !best?.clear) best = better(best, guaranteedOutcome(problem, free));
	best = roomier(problem, best as unknown as Outcome, bound, ends);
	const { candidate, paths, law, method } = best;
	const { assignment, cap } = candidate;
	onProgress?.(1, "planned");
	return {
		version: PLANNER_VERSION,
		target: assignment.target,
		degree: paths.degree,
		paths: paths.coefficients,
		law,
		shortest: lawDuration(law),
		straightLineBound: bound,
		certificate: { optimal: assignment.optimal, cost: assignment.cost, bound: assignment.bound, cap },
		method,
	};
}

/** Each drone to the place it is told: straight. */
function planForced(problem: LegProblem, target: Int32Array): Plan {
	const { from, to, limits } = problem;
	const count = from.length / 3;
	const paths = straightPaths(from, to, target);
	const law =
		problem.kind === "transition"
			? lawWithin(paths, problem)
			: verticalLaw(problem.kind, from, to, limits, problem.timeLaw);
	let bound = 0;
	for (let i = 0; i < count; i++) {
		const [a, b] = [3 * i, 3 * target[i]];
		bound = Math.max(bound, straightTime(to[b] - from[a], to[b + 1] - from[a + 1], to[b + 2] - from[a + 2], limits));
	}
	return {
		version: PLANNER_VERSION,
		target,
		degree: paths.degree,
		paths: paths.coefficients,
		law,
		shortest: lawDuration(law),
		straightLineBound: bound,
		certificate: { optimal: false, cost: 0, bound: 0, cap: null },
		method: "straight",
	};
}

/** The smaller of the two formations' own gaps, m in the measure of spacing: no bend can give more than the ends have. */
function endGap({ from, to, limits }: LegProblem): number {
	const count = from.length / 3;
	const own = Int32Array.from({ length: count }, (_, i) => i);
	const gaps = [from, to].map((points) => {
		const still = straightPaths(points, points, own);
		return smallestSeparation(still.coefficients, 1, count, limits.downwash).distance;
	});
	return Math.min(...gaps);
}

/**
 * Straight if that keeps so much gap; else bent until it does; null where that doesn't come to an end.
 * @param wanted m in the measure of spacing; @param ends the formations' own gap, which may lie a rounding under it
 */
function partedOutcome(
	problem: LegProblem,
	candidate: Candidate,
	bound: number,
	wanted: number,
	ends: number,
): Outcome | null {
	const gap = Math.min(wanted, ends - GAP_TOLERANCE / 20);
	const parted = partPairs(problem, candidate.assignment.target, {
		gap,
		least: Math.max(wanted - 0.95 * GAP_TOLERANCE, gap - 0.3 * GAP_TOLERANCE),
		bound,
		enough: ENOUGH * bound,
		latest: LATEST * Math.max(bound, candidate.together),
		looks: LOOKS,
	});
	return parted && outcome(problem, candidate, parted.paths, parted.paths.degree === 1 ? "straight" : "bent");
}

/** The same flights with more gap where the formations leave room for it and it costs next to no time. */
function roomier(problem: LegProblem, best: Outcome, bound: number, ends: number): Outcome {
	const { spacing, downwash } = problem.limits;
	const wanted = Math.min((1 + TIGHT_SHARE) * spacing, ends - GAP_TOLERANCE);
	if (!best.clear || wanted < LEAST_ROOM * spacing) return best;
	const count = problem.from.length / 3;
	const { coefficients, degree } = best.paths;
	if (smallestSeparation(coefficients, degree, count, downwash).distance >= wanted - GAP_TOLERANCE) return best;
	const found = partedOutcome(problem, best.candidate, bound, wanted, ends);
	return found?.clear && lawDuration(found.law) <= ROOM_COSTS * lawDuration(best.law) ? found : best;
}

/** Paths that part every pair whatever the formations; they hold for an uncapped optimal assignment alone. */
function guaranteedOutcome(problem: LegProblem, candidate: Candidate): Outcome {
	const paths = guaranteedPaths(problem.from, problem.to, candidate.assignment.target, problem.volume);
	return outcome(problem, candidate, paths, "guaranteed");
}

function outcome(problem: LegProblem, candidate: Candidate, paths: Paths, method: string): Outcome {
	const count = candidate.assignment.target.length;
	const breach = findBreach(paths.coefficients, paths.degree, count, problem.volume, problem.blocked);
	return {
		candidate,
		paths,
		law: lawWithin(paths, problem),
		method,
		clear: breach === null && keepsSpacing(paths, problem),
	};
}

function keepsSpacing(paths: Paths, problem: LegProblem): boolean {
	const count = problem.from.length / 3;
	const { spacing, downwash } = problem.limits;
	return smallestSeparation(paths.coefficients, paths.degree, count, downwash).distance >= spacing - GAP_TOLERANCE;
}

/** What flies before what does not; the shorter first; ties to the earlier. */
function better(best: Outcome | null, next: Outcome): Outcome {
	if (best === null || (next.clear && !best.clear)) return next;
	if (best.clear && !next.clear) return best;
	return lawDuration(next.law) < lawDuration(best.law) - 1e-9 ? next : best;
}

/** The law fitted at instants, then held to the exact peaks that the proof finds. */
function lawWithin(paths: Paths, problem: LegProblem): TimeLaw {
	const count = problem.from.length / 3;
	const law = lawForPaths(paths, count, problem.limits, problem.timeLaw);
	if (lawDuration(law) === 0) return law;
	let fitted = law;
	for (let k = 0; k < 3; k++) {
		const peaks = peaksOfFlight(paths.coefficients, paths.degree, count, fitted);
		const over = limitRatio(peaks, problem.limits);
		if (over <= 1 + 1e-9) break;
		fitted = dilate(fitted, over);
	}
	return fitted;
}
