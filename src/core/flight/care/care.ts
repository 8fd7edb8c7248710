import type { FleetSlots, Show } from "../../show/index.ts";
import type { ShowFlight } from "../show-flight.ts";
import { type Airtime, airtimeOf } from "./airtime.ts";
import { type AsFlown, flyAsFollowed } from "./as-flown.ts";
import { type FallZone, findFallZone } from "./fall-zone.ts";
import { type WakeHold, wakeHolds } from "./wake.ts";
import { type WakeRemedy, wakeRemedies } from "./wake-remedies.ts";

/**
 * What has to be cared for beyond the proof of each transition: where a dead drone would come down and how hard, who
 * stands in whose wake, how the fleet lags behind its paths, how long each drone runs. All of it is estimated from
 * stated assumptions; none of it changes the verdicts.
 */
export interface Care {
	/** Null where nothing leaves the ground. */
	readonly fallZone: FallZone | null;
	readonly wakeHolds: readonly WakeHold[];
	/** For the formations of those holds, each once. */
	readonly wakeRemedies: readonly WakeRemedy[];
	readonly asFlown: AsFlown;
	readonly airtime: Airtime | null;
}

/** @param slots every formation filled up to the fleet */
export function careFor(show: Show, slots: ReadonlyMap<string, FleetSlots>, flight: ShowFlight): Care {
	const placesOf = (id: string): Float64Array => slots.get(id)?.all ?? new Float64Array(0);
	const holds = wakeHolds(show, flight, placesOf);
	const inShow = holds.filter(({ where }) => where === "show");
	const formations = [...new Set(inShow.map(({ formation }) => formation))];
	return {
		fallZone: findFallZone(show, flight),
		wakeHolds: holds,
		wakeRemedies: formations.flatMap((id) => wakeRemedies(show, show.formations.byId[id], placesOf(id))),
		asFlown: flyAsFollowed(show, flight),
		airtime: airtimeOf(show, flight),
	};
}
