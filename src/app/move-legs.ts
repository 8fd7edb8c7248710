import type { Leg, ShowFlight } from "../core/flight/index.ts";
import { createBeatMap, cueTimes, endOfShow, type Show, type Stay, transitionsInTime } from "../core/show/index.ts";

/** Climb and launch before the transitions, the way back and the descent after them. */
const BEFORE = 2;
const AFTER = 2;

/**
 * The flight of a show whose cues have moved in time and nothing else: the same plans at other times. What the worker
 * assembles in full is had here within a frame. A late start is held up by the arrival before it; launch and landing
 * keep their durations and their distance from the show.
 * @param flight assembled for a show with the same transitions in the same order, in the same formations
 * @param before the show it was assembled for
 */
export function moveLegs(flight: ShowFlight, before: Show, show: Show): ShowFlight {
	if (before === show || flight.legs.length < BEFORE + AFTER) return flight;
	const [old, now] = [timesOf(before), timesOf(show)];
	const early = now.first - old.first;
	const late = now.over - old.over;
	const count = flight.legs.length;
	const legs = flight.legs.map((leg, index): Leg => {
		if (index < BEFORE) return shifted(leg, early);
		if (index >= count - AFTER) return shifted(leg, late);
		return { ...leg, ...now.transitions[index - BEFORE] };
	});
	const stays = flight.stays.map((stay, index): Stay => {
		const arrives = index === 0 ? stay.arrives : now.transitions[index - 1].arrives;
		const departs = index === flight.stays.length - 1 ? stay.departs : now.transitions[index].departs;
		return { ...stay, arrives, departs };
	});
	return { ...flight, legs, stays, begins: flight.begins + early, ends: flight.ends + late };
}

const shifted = (leg: Leg, seconds: number): Leg =>
	seconds === 0 ? leg : { ...leg, departs: leg.departs + seconds, arrives: leg.arrives + seconds };

interface ShowTimes {
	readonly transitions: readonly { readonly departs: number; readonly arrives: number }[];
	/** Seconds: launch is over before this, landing begins after that. */
	readonly first: number;
	readonly over: number;
}

function timesOf(show: Show): ShowTimes {
	const beatMap = createBeatMap(show.grid);
	let free = Number.NEGATIVE_INFINITY;
	const transitions = transitionsInTime(show, beatMap).map((cue) => {
		const { start, end } = cueTimes(cue, beatMap);
		const departs = Math.max(start, free);
		free = Math.max(end, departs);
		return { departs, arrives: free };
	});
	return {
		transitions,
		first: Math.min(0, transitions[0]?.departs ?? 0),
		over: Math.max(endOfShow(show, beatMap), transitions.at(-1)?.arrives ?? 0, 0),
	};
}
