import type { Leg, Plan, ShowFlight } from "../../../../src/core/flight/index.ts";
import { createShow, type Show } from "../../../../src/core/show/index.ts";

/** A leg on which drones fly straight at steady speed from `from` to `to`: ends are abrupt, so speeds are known. */
export function steadyLeg(
	id: string,
	departs: number,
	seconds: number,
	from: readonly number[],
	to: readonly number[],
	delays: Float64Array | null = null,
): Leg {
	const drones = from.length / 3;
	const longest = delays === null ? 0 : Math.max(...delays);
	const paths = new Float64Array(6 * drones);
	from.forEach((value, k) => {
		paths[2 * k] = value;
		paths[2 * k + 1] = to[k] - value;
	});
	const plan: Plan = {
		version: 0,
		target: Int32Array.from({ length: drones }, (_, i) => i),
		degree: 1,
		paths,
		law: {
			kind: "s-curve",
			borders: Float64Array.of(0, seconds),
			coefficients: Float64Array.of(0, 1 / seconds, 0, 0, 0, 0),
		},
		shortest: seconds,
		straightLineBound: seconds,
		certificate: { optimal: true, cost: 0, bound: 0, cap: null },
		method: "straight",
	};
	const rowOfDrone = Int32Array.from({ length: drones }, (_, i) => i);
	return { id, departs, arrives: departs + seconds + longest, plan, rowOfDrone, delays };
}

export function flightOf(legs: readonly Leg[], ground: Float64Array = new Float64Array(0)): ShowFlight {
	const drones = legs[0].rowOfDrone.length;
	return { drones, legs, stays: [], begins: legs[0].departs, ends: legs.at(-1)?.arrives ?? 0, ground };
}

/** An empty show with a fleet, and fields of fleet and venue set. */
export function showWith(drones: number, fleet: Partial<Show["fleet"]>, venue: Partial<Show["venue"]> = {}): Show {
	const show = createShow(drones);
	return { ...show, fleet: { ...show.fleet, ...fleet }, venue: { ...show.venue, ...venue } };
}
