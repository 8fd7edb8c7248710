import { busiestMoment, type Leg, type ShowFlight, type TransitionCheck } from "../core/flight/index.ts";
import type { Limits } from "../core/show/index.ts";

/** Instants at which a large fleet is looked at: enough for the eye, and no stall. */
const FEW = 25;

/** Seconds of the show: where a leg is nearest to what stops it, or over it. */
export function tightestMoment(check: TransitionCheck, flight: ShowFlight, limits: Limits): number {
	const { verdicts, breach, gap } = check;
	if (breach !== null) return breach.time;
	if (gap !== null && verdicts.includes("too-close")) return gap.time;
	const legs: Leg[] = flight.legs.filter(({ id }) => id === check.id);
	if (legs.length === 0) return check.departs.time;
	const inTime = check.needed === null ? 0 : check.needed / Math.max(1e-6, check.available);
	const inSpace = gap === null ? 0 : limits.spacing / gap.distance;
	if (gap !== null && !verdicts.includes("too-fast") && inSpace > inTime) return gap.time;
	return busiestMoment(legs, limits, flight.drones > 400 ? FEW : undefined).time;
}
