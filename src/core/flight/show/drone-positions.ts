import { lawAt, lawDuration } from "../law/time-law.ts";
import type { Leg, ShowFlight } from "../show-flight.ts";

/**
 * Where every drone is at `time`, into `out`: 3·N metres, drone after drone; on the ground before and after.
 * @param time seconds of the show, any
 * @param out 3·N numbers
 */
export function dronePositions(flight: ShowFlight, time: number, out: Float32Array | Float64Array): void {
	const leg = legAt(flight, time);
	if (leg === null) {
		out.set(flight.ground);
		return;
	}
	const { plan, rowOfDrone, delays } = leg;
	const width = plan.degree + 1;
	let longest = 0;
	if (delays !== null) for (const delay of delays) longest = Math.max(longest, delay);
	const duration = leg.arrives - leg.departs - longest;
	const own = lawDuration(plan.law);
	const since = time - leg.departs;
	const sAfter = (wait: number): number => {
		if (since - wait >= duration) return 1;
		return duration > 0 ? lawAt(plan.law, ((since - wait) * own) / duration) : 0;
	};
	const together = sAfter(0);
	for (let drone = 0; drone < flight.drones; drone++) {
		const row = rowOfDrone[drone];
		const s = delays === null ? together : sAfter(delays[row]);
		for (let axis = 0; axis < 3; axis++) {
			const start = (3 * row + axis) * width;
			let value = 0;
			for (let k = plan.degree; k >= 0; k--) value = value * s + plan.paths[start + k];
			out[3 * drone + axis] = value;
		}
	}
}

/** The leg flown at `time`, or the one flown last before it; null on the ground. */
export function legAt(flight: ShowFlight, time: number): Leg | null {
	if (flight.legs.length === 0 || time < flight.begins || time >= flight.ends) return null;
	let low = 0;
	let high = flight.legs.length;
	while (high - low > 1) {
		const middle = (low + high) >> 1;
		if (flight.legs[middle].departs <= time) low = middle;
		else high = middle;
	}
	return flight.legs[low];
}
