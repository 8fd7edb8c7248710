import type { Show } from "../../show/index.ts";
import type { ShowFlight } from "../show-flight.ts";
import { wavesOf } from "./motion.ts";

/** How long each drone runs, from the start of its motors (its wave's turn to climb) until it is down. */
export interface Airtime {
	/** N entries, seconds, drone after drone. */
	readonly seconds: readonly number[];
	/** The drone that runs longest, and the one that runs shortest. */
	readonly longest: { readonly drone: number; readonly seconds: number };
	readonly shortest: { readonly drone: number; readonly seconds: number };
	/** Seconds: endurance less reserve. */
	readonly limit: number;
}

/** @returns null where nothing flies */
export function airtimeOf(show: Show, flight: ShowFlight): Airtime | null {
	const first = flight.legs[0];
	const last = flight.legs.at(-1);
	if (first === undefined || last === undefined) return null;
	const down = last.departs + wavesOf(last).moving;
	const seconds = Array.from({ length: flight.drones }, (_, drone) => {
		const starts = first.departs + (first.delays?.[first.rowOfDrone[drone]] ?? 0);
		return down + (last.delays?.[last.rowOfDrone[drone]] ?? 0) - starts;
	});
	const named = (drone: number) => ({ drone, seconds: seconds[drone] });
	let [most, least] = [0, 0];
	for (let drone = 1; drone < seconds.length; drone++) {
		if (seconds[drone] > seconds[most]) most = drone;
		if (seconds[drone] < seconds[least]) least = drone;
	}
	const { endurance, reserve } = show.fleet.limits;
	return { seconds, longest: named(most), shortest: named(least), limit: endurance * (1 - reserve) };
}
