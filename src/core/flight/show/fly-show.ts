import type { FleetSlots, Show } from "../../show/index.ts";
import type { ShowCheck } from "../check.ts";
import type { LegProblem } from "../leg-problem.ts";
import type { Plan } from "../plan.ts";
import { planLeg } from "../plan-leg.ts";
import type { ShowFlight } from "../show-flight.ts";
import { assembleFlight } from "./assemble-flight.ts";
import { checkShow, type ProofCache } from "./check-show.ts";
import { legProblems } from "./leg-problems.ts";

export interface FlownShow {
	readonly flight: ShowFlight;
	readonly check: ShowCheck;
	/** By key of their problems. */
	readonly plans: Map<string, Plan>;
	readonly problems: LegProblem[];
}

/**
 * Plans every leg of a show, strings them together and checks them: what the command line, the rough cut and tests do
 * in one call, and the app in a pool of workers.
 * @param planOf plans one leg; asked once for each key
 * @param known plans by key that need not be made again
 */
export function flyShow(
	show: Show,
	slots: ReadonlyMap<string, FleetSlots>,
	ground: Float64Array,
	planOf: (problem: LegProblem) => Plan = planLeg,
	known: ReadonlyMap<string, Plan> = new Map(),
	proofs: ProofCache = new Map(),
): FlownShow {
	const plans = new Map<string, Plan>();
	// Twice: the way back over the take-off grid depends on where all other legs leave each drone.
	for (let round = 0; round < 2; round++) {
		for (const problem of legProblems(show, slots, ground, plans)) {
			if (!plans.has(problem.key)) plans.set(problem.key, known.get(problem.key) ?? planOf(problem));
		}
	}
	const flight = assembleFlight(show, slots, ground, plans);
	const check = checkShow(show, slots, flight, plans, proofs);
	return { flight, check, plans, problems: legProblems(show, slots, ground, plans) };
}
