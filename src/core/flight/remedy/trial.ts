import { fillFleet, slotsOf, takeoffSlots } from "../../formation/index.ts";
import { applyEdit, type FleetSlots, type Formation, type Show } from "../../show/index.ts";
import { GAP_TOLERANCE, LIMIT_TOLERANCE, StarstaveError } from "../../units/index.ts";
import type { ShowCheck } from "../check.ts";
import type { LegProblem } from "../leg-problem.ts";
import type { Plan, Verdict } from "../plan.ts";
import { planLeg } from "../plan-leg.ts";
import { neededTime, provePlanOnce } from "../proof/prove-plan.ts";
import { assembleFlight } from "../show/assemble-flight.ts";
import { legProblems } from "../show/leg-problems.ts";
import type { ShowFlight } from "../show-flight.ts";
import { applyRemedy, type RemedyStep } from "./remedy.ts";

/** A show as it was checked: what a change of it is held against. */
export interface TrialBase {
	readonly show: Show;
	readonly slots: ReadonlyMap<string, FleetSlots>;
	/** 3·N metres on the take-off grid. */
	readonly ground: Float64Array;
	/** By key of their problems: of every leg. Their paths are not needed, and may be left out. */
	readonly plans: ReadonlyMap<string, Plan>;
	/** Ids of legs that don't fly as the show stands. */
	readonly failing: ReadonlySet<string>;
	/** Those of them that break spacing or venue, which no duration mends. */
	readonly unclear: ReadonlySet<string>;
}

/** A show with its flight, as a base for trials. */
export function trialBase(
	show: Show,
	slots: ReadonlyMap<string, FleetSlots>,
	flight: ShowFlight,
	check: ShowCheck,
): TrialBase {
	const { ground, legs } = flight;
	const plans = new Map<string, Plan>();
	// Without plans all legs are listed but those that sort the fleet, which come before the descent.
	const main = legProblems(show, slots, ground);
	for (const [k, { key }] of main.slice(0, -1).entries()) plans.set(key, legs[k].plan);
	if (main.length > 0) plans.set(main[main.length - 1].key, legs[legs.length - 1].plan);
	for (const [k, { key }] of legProblems(show, slots, ground, plans).entries()) plans.set(key, legs[k].plan);
	const those = (broken: (verdicts: readonly Verdict[]) => boolean): Set<string> =>
		new Set(
			[check.launch, ...check.transitions, check.landing].flatMap((leg) =>
				leg !== null && broken(leg.verdicts) ? [leg.id] : [],
			),
		);
	return {
		show,
		slots,
		ground,
		plans,
		failing: those((verdicts) => !verdicts.includes("flies")),
		unclear: those((verdicts) => verdicts.includes("too-close") || verdicts.includes("out-of-venue")),
	};
}

/** How one leg of the changed show comes out. */
export interface LegOutcome {
	readonly problem: LegProblem;
	/** Seconds. */
	readonly needed: number;
	/** Null for launch and landing, which take the time they need. */
	readonly available: number | null;
	/** Keeps spacing and venue on its whole way. */
	readonly clear: boolean;
	readonly flies: boolean;
}

/** What comes of a change that makes what was asked for fly and breaks nothing that flew. */
export interface Trial {
	readonly show: Show;
	readonly slots: ReadonlyMap<string, FleetSlots>;
	/** Legs that the change gave another plan or another time, by id; launch and landing joined. */
	readonly outcomes: ReadonlyMap<string, LegOutcome>;
	/** Plans that were made for it, by key. */
	readonly plans: ReadonlyMap<string, Plan>;
}

/** Why a change is no remedy: what came out of the leg that stopped it; null where the show itself refused. */
export interface Refused {
	readonly refused: LegOutcome | null;
}

export function isRefused(answer: Trial | Refused): answer is Refused {
	return "refused" in answer;
}

/**
 * Applies steps to a show, plans and proves every leg that has become another, and says whether the legs `must` (by id,
 * in the order in which they are tried) then fly and nothing that flew stops flying.
 * @param ready plans made for it already, by key; proven like any other
 */
export function tryOut(
	base: TrialBase,
	steps: readonly RemedyStep[],
	must: readonly string[],
	ready: ReadonlyMap<string, Plan> = new Map(),
): Trial | Refused {
	let show: Show;
	try {
		show = applyEdit(base.show, (draft) => applyRemedy(draft, { steps })).show;
	} catch (error) {
		// A place past the music, a scale out of its range: not a remedy, and no fault either.
		if (error instanceof StarstaveError) return { refused: null };
		throw error;
	}
	const slots = slotsAfter(base, show);
	const ground = sameGrid(base.show, show) ? base.ground : takeoffSlots(show);
	const plans = new Map(base.plans);
	const made = new Map<string, Plan>();
	const outcomes = new Map<string, LegOutcome>();
	const judge = (problem: LegProblem): LegOutcome => {
		const known = base.plans.get(problem.key);
		const plan = plans.get(problem.key) ?? ready.get(problem.key) ?? planLeg(problem);
		if (known === undefined) {
			plans.set(problem.key, plan);
			made.set(problem.key, plan);
		}
		const outcome = judgeLeg(plan, problem, known === undefined ? null : !base.unclear.has(problem.id));
		if (known === undefined || must.includes(problem.id)) keep(outcomes, outcome);
		return outcome;
	};
	const breaks = ({ flies, problem }: LegOutcome): boolean =>
		!flies && (must.includes(problem.id) || !base.failing.has(problem.id));
	const problems = legProblems(show, slots, ground);
	const rank = ({ id }: LegProblem): number => (must.includes(id) ? must.indexOf(id) : must.length);
	for (const problem of [...problems].sort((a, b) => rank(a) - rank(b))) {
		const outcome = judge(problem);
		if (breaks(outcome)) return { refused: outcome };
	}
	// The way back over the take-off grid follows from where all other legs leave the drones.
	for (const problem of legProblems(show, slots, ground, plans).slice(problems.length - 1)) {
		const outcome = judge(problem);
		if (breaks(outcome)) return { refused: outcome };
	}
	const { limits } = show.fleet;
	const { begins, ends } = assembleFlight(show, slots, ground, plans);
	if (ends - begins > limits.endurance * (1 - limits.reserve)) {
		const before = assembleFlight(base.show, base.slots, base.ground, base.plans);
		if (ends - begins > before.ends - before.begins + 1e-6) return { refused: null };
	}
	return { show, slots, outcomes, plans: made };
}

/** @param known whether it keeps spacing and venue, as an earlier check has proven; null: to be proven */
function judgeLeg(plan: Plan, problem: LegProblem, known: boolean | null): LegOutcome {
	const needed = neededTime(plan, problem);
	const { available } = problem;
	const inTime = available === null || needed <= available * (1 + LIMIT_TOLERANCE);
	let clear = known ?? false;
	if (known === null && inTime) {
		const proof = provePlanOnce(plan, problem);
		const parted = proof.gap === null || proof.gap.distance >= problem.limits.spacing - GAP_TOLERANCE;
		clear = parted && proof.breach === null;
	}
	return { problem, needed, available, clear, flies: clear && inTime };
}

/** Launch and landing are several legs each: the one with the least in hand stands for them. */
function keep(outcomes: Map<string, LegOutcome>, outcome: LegOutcome): void {
	const { id } = outcome.problem;
	const before = outcomes.get(id);
	if (before === undefined || (before.flies && !outcome.flies)) outcomes.set(id, outcome);
}

/** Slots of every formation of a changed show; those of formations that the edit left alone stay as they are. */
export function slotsAfter(base: TrialBase, show: Show): Map<string, FleetSlots> {
	const slots = new Map<string, FleetSlots>();
	for (const id of show.formations.order) {
		const formation: Formation = show.formations.byId[id];
		if (base.show.formations.byId[id] === formation) {
			// One with more slots than the fleet has drones has none, as long as nothing flies there.
			const known = base.slots.get(id);
			if (known !== undefined) slots.set(id, known);
		} else slots.set(id, fillFleet(slotsOf(formation, show.fleet.limits.downwash), show.fleet, show.venue));
	}
	return slots;
}

/** The take-off grid of a show without one of its own lies under the opening. */
function sameGrid(before: Show, after: Show): boolean {
	if (before.takeoff !== null && before.takeoff === after.takeoff) return true;
	const opening = (show: Show): unknown => (show.opening === null ? null : show.formations.byId[show.opening]);
	return before.takeoff === after.takeoff && before.opening !== null && opening(before) === opening(after);
}
