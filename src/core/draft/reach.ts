import { type LegProblem, legProblems, neededTime, type Plan } from "../flight/index.ts";
import { fleetSlotsOf, takeoffSlots } from "../formation/index.ts";
import { type Formation, type Show, toOrdered } from "../show/index.ts";

/** How long the fleet needs from one figure to another: planned once a pair, and the plans are kept. */
export interface Reach {
	/** Seconds. */
	needed(from: Formation, to: Formation): number;
}

/**
 * @param base fleet and venue
 * @param planOf plans a leg, from what is known where it can
 */
export function createReach(base: Show, planOf: (problem: LegProblem) => Plan): Reach {
	const known = new Map<string, number>();
	return {
		needed(from, to) {
			const pair = `${from.id} → ${to.id}`;
			const before = known.get(pair);
			if (before !== undefined) return before;
			const show: Show = {
				...base,
				opening: from.id,
				formations: toOrdered([from, to]),
				cues: toOrdered([
					{
						id: "reach",
						number: "1",
						kind: "transition",
						at: 0,
						length: 64,
						formation: to.id,
						group: "all",
						called: false,
						name: "",
						note: "",
						timeLaw: "s-curve",
						light: "keep",
					},
				]),
			};
			const problem = legProblems(show, fleetSlotsOf(show), takeoffSlots(show), new Map()).find(
				(one) => one.id === "reach",
			);
			const needed = problem ? neededTime(planOf(problem), problem) : Number.POSITIVE_INFINITY;
			known.set(pair, needed);
			return needed;
		},
	};
}
