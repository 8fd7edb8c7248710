import { createBeatMap, endOfShow, type FleetSlots, type Show, type Stay } from "../../show/index.ts";
import { StarstaveError } from "../../units/index.ts";
import type { LegProblem } from "../leg-problem.ts";
import type { Plan } from "../plan.ts";
import { planLeg } from "../plan-leg.ts";
import { neededTime } from "../proof/prove-plan.ts";
import type { Leg, ShowFlight } from "../show-flight.ts";
import { legProblems, openingOf, timedTransitions } from "./leg-problems.ts";

/**
 * Launch and landing take this much longer than they must: nothing hurries them. Legs in waves don't: what parts the
 * waves is the interval together with the speed, so they are flown at the very speed that they were proven at.
 */
const UNHURRIED = 1.15;
/** Seconds that the fleet stands between launch and the first departure, and before it goes to land. */
const REST = 2;

/**
 * Strings the plans together: launch is over before the music and before the first departure, landing begins when the
 * show is over. Sorting the fleet over the take-off grid is planned here if `plans` doesn't hold it.
 * @param plans by key of their problems
 * @throws StarstaveError where a plan is missing
 */
export function assembleFlight(
	show: Show,
	slots: ReadonlyMap<string, FleetSlots>,
	ground: Float64Array,
	plans: ReadonlyMap<string, Plan>,
): ShowFlight {
	const opening = openingOf(show);
	const count = show.fleet.count;
	if (opening === null || count === 0) {
		return { drones: count, legs: [], stays: [], begins: 0, ends: 0, ground };
	}
	const problems = legProblems(show, slots, ground, plans);
	const planOf = (problem: LegProblem): Plan => {
		const plan = plans.get(problem.key) ?? (problem.target !== null ? planLeg(problem) : undefined);
		if (plan !== undefined) return plan;
		throw new StarstaveError(
			"flight",
			`The leg ${problem.id} has no plan yet; plan it before the flight is put together.`,
		);
	};
	const unhurried = (problem: LegProblem, plan: Plan): number => {
		return neededTime(plan, problem) * (problem.delays === null ? UNHURRIED : 1);
	};
	const timed = timedTransitions(show);
	const [climb, launch] = problems;
	const climbPlan = planOf(climb);
	const launchPlan = planOf(launch);
	const first = Math.min(0, timed[0]?.departs ?? 0) - REST;
	const launched = first - unhurried(launch, launchPlan);
	const begins = launched - unhurried(climb, climbPlan);
	const legs: Leg[] = [];
	let rows = Int32Array.from({ length: count }, (_, i) => i);
	const fly = (problem: LegProblem, plan: Plan, departs: number, arrives: number): void => {
		const rowOfDrone = rows;
		legs.push({ id: problem.id, departs, arrives, plan, rowOfDrone, delays: problem.delays });
		rows = rows.map((row) => plan.target[row]);
	};
	fly(climb, climbPlan, begins, launched);
	fly(launch, launchPlan, launched, first);
	const stays: Stay[] = [];
	let stay = { formation: opening, arrives: -Infinity, cue: null as string | null };
	for (let k = 0; k < timed.length; k++) {
		const { cue, to, departs, arrives } = timed[k];
		stays.push({ ...stay, departs, slotOfDrone: rows });
		const problem = problems[2 + k];
		fly(problem, planOf(problem), departs, arrives);
		stay = { formation: to, arrives, cue: cue.id };
	}
	stays.push({ ...stay, departs: Infinity, slotOfDrone: rows });
	let ends = Math.max(endOfShow(show, createBeatMap(show.grid)), stay.arrives, 0) + REST;
	for (const problem of problems.slice(2 + timed.length)) {
		const plan = planOf(problem);
		const departs = ends;
		ends += unhurried(problem, plan);
		fly(problem, plan, departs, ends);
	}
	return { drones: count, legs, stays, begins, ends, ground };
}
