import { GAP_TOLERANCE, SPACING_HAIR } from "../units/index.ts";
import { type Candidate, chooseAssignments } from "./capped.ts";
import { lawForPaths } from "./law/fleet-law.ts";
import { straightTime } from "./law/straight-time.ts";
import { dilate, lawDuration } from "./law/time-law.ts";
import { verticalLaw } from "./law/vertical-law.ts";
import type { LegProblem, PlanProgress } from "./leg-problem.ts";
import { guaranteedPaths } from "./paths/guaranteed.ts";
import { partPaths } from "./paths/part-paths.ts";
import { type Paths, straightPaths } from "./paths/polynomial-paths.ts";
import type { Plan, TimeLaw } from "./plan.ts";
import { peaksOfFlight } from "./proof/peaks.ts";
import { limitRatio } from "./proof/prove-plan.ts";
import { smallestSeparation } from "./proof/separation.ts";
import { findBreach } from "./proof/venue.ts";

/** Rises whenever the same problem would give another plan. */
export const PLANNER_VERSION = 2;

/** Swells of the whole fleet with which the parting of near pairs is begun anew when it doesn't come to an end. */
const SWELLS = [0, 0.06, 0.15];
/** Rounds of parting: fewer the more drones, since each looks at every pair in sight. */
const roundsFor = (count: number): number => (count <= 400 ? 160 : count <= 1500 ? 90 : 45);
/** A plan this near to the straight-line bound is not bettered by further tries. */
const ENOUGH = 1.04;

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
	let best: Outcome | null = null;
	candidates.forEach((candidate, k) => {
		if (best?.clear && lawDuration(best.law) <= Math.max(ENOUGH * bound, candidate.longest)) return;
		onProgress?.(0.3 + (0.6 * k) / candidates.length, "parting near pairs");
		best = better(best, outcomeOf(problem, candidate));
	});
	const free = candidates.find(({ cap }) => cap === null);
	if (free && !(best as Outcome | null)?.clear) best = better(best, guaranteedOutcome(problem, free));
	const { candidate, paths, law, method } = best as unknown as Outcome;
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

/** Straight if that keeps spacing; else bent until it does. */
function outcomeOf(problem: LegProblem, candidate: Candidate): Outcome {
	const { from, to, limits } = problem;
	const { target } = candidate.assignment;
	const count = target.length;
	const straight = straightPaths(from, to, target);
	if (keepsSpacing(straight, problem)) return outcome(problem, candidate, straight, "straight");
	const longest = Math.max(1e-9, candidate.longest);
	const spare = new Float64Array(count);
	for (let i = 0; i < count; i++) {
		const [a, b] = [3 * i, 3 * target[i]];
		const own = straightTime(to[b] - from[a], to[b + 1] - from[a + 1], to[b + 2] - from[a + 2], limits);
		spare[i] = Math.max(0, 1 - own / longest);
	}
	for (const swell of SWELLS) {
		const bent = partPaths(from, to, target, {
			gap: limits.spacing + SPACING_HAIR / 4,
			downwash: limits.downwash,
			swell,
			spare,
			rounds: roundsFor(count),
		});
		if (bent === null || !keepsSpacing(bent, problem)) continue;
		const found = outcome(problem, candidate, bent, "bent");
		if (found.clear) return found;
	}
	return { candidate, paths: straight, law: lawWithin(straight, problem), method: "straight", clear: false };
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
