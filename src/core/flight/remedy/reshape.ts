/**
 * Remedies that change one of the two pictures: made smaller or larger, brought nearer, turned. How much is first told
 * by the straight-line bound under the exact assignment, which costs next to nothing; only what promises to suffice is
 * planned and proven.
 */
import { fillFleet, slotsOf } from "../../formation/index.ts";
import { smallestGap } from "../../maths/index.ts";
import type { FleetSlots, Formation, Limits, Place } from "../../show/index.ts";
import { assign } from "../assign/assign.ts";
import type { TransitionCheck } from "../check.ts";
import { straightTime } from "../law/straight-time.ts";
import { scaledMillimetres } from "../measure.ts";
import { endsOf, placeEnd } from "./ends.ts";
import { type Leeway, leewayOf, shareTime } from "./leg-times.ts";
import type { Remedy, RemedyStep } from "./remedy.ts";
import { sayOthers, sayTime } from "./say-cost.ts";
import { isRefused, type Refused, type Trial, type TrialBase, tryOut } from "./trial.ts";
import { type Reshaping, type Way, wayOf } from "./ways.ts";

/** A remedy with the plans that were made for it. */
export interface Found {
	readonly remedy: Remedy;
	readonly plans: Trial["plans"];
}

/** Plans that are made before a way is given up. */
const MOST_PLANS = 3;
/** The bound has to leave this share of the time over, since plans are a little longer. */
const MARGIN = 0.99;

/**
 * @param check the transition that doesn't fly, as it was checked
 * @returns at most one remedy for each end
 */
export function reshape(base: TrialBase, check: TransitionCheck, kind: Reshaping): Found[] {
	const ends = endsOf(base.show, check.id);
	if (ends === null || base.show.fleet.count === 0) return [];
	const found = [ends.to, ends.from].flatMap((end): Found[] => {
		const way = wayOf(base, kind, end, end.which === "to" ? ends.from : ends.to);
		const one = way === null ? null : follow(base, check, way, NO_LEEWAY);
		return one === null ? [] : [one];
	});
	// Where neither the picture nor the time alone is enough, both together may be.
	const { departs, arrives, needed, remedies } = check;
	if (found.length > 0 || remedies.length > 0 || needed === null) return found;
	if (departs.beat === null || arrives.beat === null) return found;
	const leeway = leewayOf(base.show, check.id, departs.beat, arrives.beat);
	if (leeway.early + leeway.late === 0) return found;
	const way = wayOf(base, kind, ends.to, ends.from);
	const both = way === null ? null : follow(base, check, way, leeway);
	return both === null ? [] : [both];
}

const NO_LEEWAY: Leeway = { early: 0, late: 0, seconds: 0 };

/**
 * The least amount that the bound says is enough, planned and proven; more where the plan comes out longer.
 * @param leeway beats that may be taken from the holds for it
 */
function follow(base: TrialBase, check: TransitionCheck, way: Way, leeway: Leeway): Found | null {
	const { show, slots } = base;
	const formation = show.formations.byId[way.end.formation];
	const still = slots.get(way.other.formation);
	const own = slots.get(way.end.formation);
	if (still === undefined || own === undefined) return null;
	const { limits } = show.fleet;
	const boundAt = (moved: FleetSlots): number =>
		way.end.which === "to" ? straightBound(still.all, moved.all, limits) : straightBound(moved.all, still.all, limits);
	const bound = boundAt(own);
	const available = Math.max(check.available, leeway.seconds);
	// How much longer the plan is than the bound, which a new plan likely is too.
	let longer = check.needed === null || bound <= 0 ? 1 : Math.max(1, check.needed / bound);
	let plans = 0;
	// Where no time is enough, the bound says nothing: a few amounts are planned.
	const stride = check.needed === null ? Math.max(1, Math.ceil(way.steps / MOST_PLANS)) : 1;
	for (let k = stride; k <= way.steps && plans < MOST_PLANS; k += stride) {
		const moved = fillAt(base, formation, way.at(k / way.steps).place);
		const promised = boundAt(moved);
		const bends = way.kind === "spread" ? bendsLeft(moved, still, limits) : 1;
		if (check.needed !== null && promised * (1 + (longer - 1) * bends) > available * MARGIN) continue;
		plans++;
		const answer = tryAmount(base, check, way, k, leeway);
		if ("remedy" in answer) {
			// The plan may come out shorter than was feared: then less is enough.
			if (leeway !== NO_LEEWAY || answer.needed > 0.95 * available) return answer;
			return tryLess(base, check, way, k, MOST_PLANS - plans) ?? answer;
		}
		const { refused } = answer;
		if (refused?.problem.id === check.id && refused.needed > available && promised > 0) {
			longer = Math.max(longer, 1 + (refused.needed / promised - 1) / Math.max(0.25, bends));
		}
	}
	return null;
}

/** A step less at a time, as long as it flies. */
function tryLess(base: TrialBase, check: TransitionCheck, way: Way, from: number, most: number): Found | null {
	let best: Found | null = null;
	for (let k = from - 1; k >= 1 && from - k <= most; k--) {
		const answer = tryAmount(base, check, way, k, NO_LEEWAY);
		if (!("remedy" in answer)) break;
		best = answer;
	}
	return best;
}

/** One amount, with all the time that the leeway gives at first, and then with no more of it than the plan needs. */
function tryAmount(
	base: TrialBase,
	check: TransitionCheck,
	way: Way,
	k: number,
	leeway: Leeway,
): (Found & { needed: number }) | Refused {
	const { place, change, loss, cost } = way.at(k / way.steps);
	const [from, to] = [check.departs.beat ?? 0, check.arrives.beat ?? 0];
	const timed = (departs: number, arrives: number): RemedyStep[] =>
		departs === from && arrives === to
			? []
			: [{ do: "change-cue", id: check.id, change: { at: departs, length: arrives - departs } }];
	const shaped = placeEnd(base.show, way.end, place).steps;
	let steps = [...shaped, ...timed(from - leeway.early, to + leeway.late)];
	let trial = tryOut(base, steps, [check.id]);
	if (isRefused(trial)) return trial;
	const needed = trial.outcomes.get(check.id)?.needed ?? 0;
	const timing = leeway === NO_LEEWAY ? null : shareTime(base.show, check.id, from, to, [needed]);
	if (timing !== null) {
		steps = [...shaped, ...timed(timing.beats[0], timing.beats[1])];
		trial = tryOut(base, steps, [check.id], trial.plans);
		if (isRefused(trial)) return trial;
	}
	const parts = [cost, sayOthers(way.end), sayTime(base, trial, check)].filter((part) => part !== "");
	const ghost = trial.slots.get(
		trial.outcomes.get(check.id)?.problem[way.end.which === "to" ? "toFormation" : "fromFormation"] ?? "",
	);
	const remedy: Remedy = {
		kind: `${way.kind}-${way.end.which}`,
		change: timing === null ? change : `${change} ${timing.change}`,
		cost: parts.join(" "),
		loss: loss + (timing?.loss ?? 0),
		steps,
		ghost: ghost?.positions.slice() ?? null,
	};
	return { remedy, plans: trial.plans, needed };
}

/**
 * How much of the bends two pictures still ask for: all where one stands at the spacing, none where both stand √2 times
 * as far apart (Turpin, Michael & Kumar, IJRR 2014).
 */
function bendsLeft(one: FleetSlots, other: FleetSlots, { spacing, downwash }: Limits): number {
	const gap = Math.min(smallestGap(one.all, downwash).distance, smallestGap(other.all, downwash).distance);
	return Math.min(1, Math.max(0, (Math.SQRT2 - gap / spacing) / (Math.SQRT2 - 1)));
}

function fillAt({ show }: TrialBase, formation: Formation, place: Place): FleetSlots {
	return fillFleet(slotsOf({ ...formation, place }, show.fleet.limits.downwash), show.fleet, show.venue);
}

/** Seconds: the longest straight flight of the exact assignment. */
export function straightBound(from: Float64Array, to: Float64Array, limits: Limits): number {
	const solved = assign(scaledMillimetres(from, limits.downwash), scaledMillimetres(to, limits.downwash));
	let longest = 0;
	solved?.target.forEach((slot, i) => {
		const [a, b] = [3 * i, 3 * slot];
		longest = Math.max(
			longest,
			straightTime(to[b] - from[a], to[b + 1] - from[a + 1], to[b + 2] - from[a + 2], limits),
		);
	});
	return longest;
}
