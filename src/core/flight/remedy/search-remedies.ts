import type { FleetSlots, Show } from "../../show/index.ts";
import type { ShowCheck } from "../check.ts";
import type { ShowFlight } from "../show-flight.ts";
import { goByWay } from "./by-way.ts";
import { endsOf } from "./ends.ts";
import { mendFormation } from "./mend-formation.ts";
import { type Found, reshape } from "./reshape.ts";
import { isRefused, type TrialBase, trialBase, tryOut } from "./trial.ts";
import type { Reshaping } from "./ways.ts";

/** The ways in space in which remedies are looked for, each a piece of work of its own. */
export const REMEDY_SEARCHES = ["shrink", "nearer", "turn", "spread", "way"] as const;
export type RemedySearch = (typeof REMEDY_SEARCHES)[number];

/**
 * Looks for remedies of one transition that doesn't fly, in one way. Every remedy found has been applied to the show,
 * and every leg that it touches planned and proven: it makes the transition fly, and nothing that flew stops flying.
 * Remedies in time alone are part of the check itself.
 * @param flight of the show, as it was checked; paths of its plans may be left out
 * @param id of the transition's cue
 * @returns none where the transition flies, or where nothing of the kind helps
 */
export function searchRemedies(
	show: Show,
	slots: ReadonlyMap<string, FleetSlots>,
	flight: ShowFlight,
	check: ShowCheck,
	id: string,
	search: RemedySearch,
): Found[] {
	const transition = check.transitions.find((one) => one.id === id);
	if (transition === undefined || transition.verdicts.includes("flies")) return [];
	const base = trialBase(show, slots, flight, check);
	if (search === "way") return goByWay(base, transition);
	const found = reshape(base, transition, search satisfies Reshaping);
	// An end in which the fleet can't stand at all is mended first, and only then the flight.
	return search === "spread" ? [...found, ...mendEnds(base, check, id)] : found;
}

function mendEnds(base: TrialBase, { formations }: ShowCheck, id: string): Found[] {
	const ends = endsOf(base.show, id);
	const bad = [ends?.from.formation, ends?.to.formation].filter((end): end is string =>
		formations.some((one) => one.id === end && !one.verdicts.includes("flies")),
	);
	return bad
		.flatMap((formation) => mendFormation(base, formation))
		.filter(({ remedy, plans }) => !isRefused(tryOut(base, remedy.steps, [id], plans)));
}

/**
 * Remedies of a formation in which the fleet can't stand, each laid out and checked, best first. Flights to and from it
 * are planned, and what becomes of them is part of the cost.
 */
export function mendedFormation(
	show: Show,
	slots: ReadonlyMap<string, FleetSlots>,
	flight: ShowFlight,
	check: ShowCheck,
	id: string,
): Found[] {
	return mendFormation(trialBase(show, slots, flight, check), id);
}
