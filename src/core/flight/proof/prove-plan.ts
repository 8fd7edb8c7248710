import { GAP_TOLERANCE, LIMIT_TOLERANCE, StarstaveError, TIGHT_SHARE } from "../../units/index.ts";
import type { LegProblem } from "../leg-problem.ts";
import type { Plan, Proof, TimeLaw, Verdict } from "../plan.ts";
import { type Peaks, peaksOfFlight } from "./peaks.ts";
import { smallestSeparation } from "./separation.ts";
import { findBreach, type VenueBreach } from "./venue.ts";
import { GROUND_HEIGHT, smallestWaveGap } from "./waves.ts";

/** What is proven of a plan whatever the duration: peaks are those of the shortest and scale from there. */
export interface PlanProof {
	readonly peaks: Peaks;
	/** Null with fewer than two drones. */
	readonly gap: { readonly distance: number; readonly at: number; readonly drones: readonly [number, number] } | null;
	readonly breach: VenueBreach | null;
	readonly separation: string;
}

/**
 * Proves a plan over the whole flight. Uses nothing of the planner: only the coefficients that are flown.
 * @throws StarstaveError where the plan isn't one for this problem
 */
export function provePlanOnce(plan: Plan, problem: LegProblem): PlanProof {
	requireEnds(plan, problem);
	const count = plan.target.length;
	const { limits } = problem;
	const peaks = peaksOfFlight(plan.paths, plan.degree, count, plan.law);
	const breach = findBreach(plan.paths, plan.degree, count, problem.volume, problem.blocked);
	if (problem.delays !== null) {
		const radius = limits.spacing * 2;
		const gap = smallestWaveGap(plan.paths, problem.delays, plan.law, limits.downwash, radius);
		const known = gap.distance < Infinity;
		return {
			peaks,
			breach,
			gap: known ? { distance: gap.distance, at: gap.time, drones: gap.drones } : null,
			separation: `heights over time, in closed cells; below ${GROUND_HEIGHT} m the grid's own pitch counts`,
		};
	}
	const separation = smallestSeparation(plan.paths, plan.degree, count, limits.downwash);
	return {
		peaks,
		breach,
		gap: count < 2 ? null : separation,
		separation:
			plan.degree === 1
				? "all pairs, closed form of two straight lines on one time law"
				: `all pairs, |D(s)|² of degree ${2 * plan.degree} in Bernstein form, subdivided until proven`,
	};
}

/** A proof for one duration, from what was proven once. Dilation scales speeds by 1/k, accelerations 1/k², jerks 1/k³. */
export function proofFor(proven: PlanProof, plan: Plan, problem: LegProblem, duration: number): Proof {
	const { limits } = problem;
	// A leg of no time at all has no finite speed: a millisecond stands for it, which is too fast for any move.
	const flown = Math.max(duration - longestDelay(problem), 1e-3);
	const slower = plan.shortest > 0 ? flown / plan.shortest : 1;
	const peak = {
		horizontal: proven.peaks.horizontal / slower,
		climb: proven.peaks.climb / slower,
		descent: proven.peaks.descent / slower,
		acceleration: proven.peaks.acceleration / slower ** 2,
		jerk: proven.peaks.jerk / slower ** 3,
	};
	const verdicts: Verdict[] = [];
	if (limitRatio(peak, limits) > 1 + LIMIT_TOLERANCE) verdicts.push("too-fast");
	if (proven.gap !== null && proven.gap.distance < limits.spacing - GAP_TOLERANCE) verdicts.push("too-close");
	if (proven.breach !== null) verdicts.push("out-of-venue");
	if (verdicts.length === 0) {
		verdicts.push("flies");
		const needed = neededTime(plan, problem);
		const tightInTime = plan.shortest > 0 && needed > (1 - TIGHT_SHARE) * duration;
		const tightInSpace = proven.gap !== null && proven.gap.distance < (1 + TIGHT_SHARE) * limits.spacing;
		if (tightInTime || tightInSpace) verdicts.push("tight");
	}
	let gap: Proof["gap"] = null;
	if (proven.gap !== null) {
		const { distance, at, drones } = proven.gap;
		const time = problem.delays === null ? timeAt(plan.law, at) * slower : at;
		gap = { distance, time, drones: [drones[0], drones[1]] };
	}
	return { peak, gap, verdicts, separation: proven.separation };
}

/** The proof of a plan flown in `duration` seconds. */
export function provePlan(plan: Plan, problem: LegProblem, duration: number): Proof {
	return proofFor(provePlanOnce(plan, problem), plan, problem, duration);
}

/** Seconds: shortest duration within all limits, the wait of the last wave included. */
export function neededTime(plan: Plan, problem: LegProblem): number {
	return plan.shortest + longestDelay(problem);
}

function longestDelay(problem: LegProblem): number {
	let longest = 0;
	if (problem.delays !== null) for (const delay of problem.delays) longest = Math.max(longest, delay);
	return longest;
}

/** Largest of peak over limit. */
export function limitRatio(peak: Proof["peak"], limits: LegProblem["limits"]): number {
	return Math.max(
		peak.horizontal / limits.horizontal,
		peak.climb / limits.climb,
		peak.descent / limits.descent,
		peak.acceleration / limits.acceleration,
		peak.jerk / limits.jerk,
	);
}

/** A path that doesn't start and end in its slots would jump when the leg begins or ends. */
function requireEnds(plan: Plan, problem: LegProblem): void {
	const count = problem.from.length / 3;
	const width = plan.degree + 1;
	const wrong = (what: string): StarstaveError =>
		new StarstaveError("flight", `The plan of ${problem.id} ${what}; plan it again for these slots.`);
	if (plan.target.length !== count || plan.paths.length !== count * 3 * width) {
		throw wrong(`is for ${plan.target.length} drones, not ${count}`);
	}
	const taken = new Uint8Array(count);
	for (let i = 0; i < count; i++) {
		const slot = plan.target[i];
		if (!(slot >= 0 && slot < count) || taken[slot] === 1) throw wrong("sends two drones to one slot");
		taken[slot] = 1;
		for (let axis = 0; axis < 3; axis++) {
			let end = 0;
			for (let k = 0; k < width; k++) end += plan.paths[(3 * i + axis) * width + k];
			const startsOff = Math.abs(plan.paths[(3 * i + axis) * width] - problem.from[3 * i + axis]);
			const endsOff = Math.abs(end - problem.to[3 * slot + axis]);
			if (!(startsOff < 1e-6 && endsOff < 1e-6)) throw wrong("does not join its slots");
		}
	}
}

/** Seconds at which the law reaches s, by halving: s rises with time. */
function timeAt(law: TimeLaw, s: number): number {
	const pieces = law.borders.length - 1;
	if (pieces === 0 || s <= 0) return 0;
	if (s >= 1) return law.borders[pieces];
	let low = 0;
	let high = law.borders[pieces];
	for (let step = 0; step < 60; step++) {
		const middle = (low + high) / 2;
		let piece = 0;
		while (piece < pieces - 1 && middle >= law.borders[piece + 1]) piece++;
		const t = middle - law.borders[piece];
		let value = 0;
		for (let k = 5; k >= 0; k--) value = value * t + law.coefficients[6 * piece + k];
		if (value < s) low = middle;
		else high = middle;
	}
	return (low + high) / 2;
}
