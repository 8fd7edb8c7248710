import type { Show, Wake } from "../../show/index.ts";
import { createBeatMap, endOfShow } from "../../show/index.ts";
import type { ShowFlight } from "../show-flight.ts";

/** A hold in which drones stand in the wake of others: the air that those throw down. */
export interface WakeHold {
	/** The formation's id; the cue that brought the fleet there, null for the opening. */
	readonly formation: string;
	readonly cue: string | null;
	/** Seconds of the show. */
	readonly from: number;
	readonly to: number;
	/** How many drones stand under at least one other. */
	readonly drones: number;
	/** The drone with the most others above it, and how many they are; drones from 0. */
	readonly worst: { readonly drone: number; readonly above: number };
}

/**
 * For each place how many others it stands under: above it by no more than the wake's reach, and no further aside than
 * its radius. The wake is taken as an upright cylinder; wind that carries it aside and its widening are left out.
 * @param positions 3·N metres
 */
export function countAbove(positions: Float64Array, wake: Wake): Int32Array {
	const count = positions.length / 3;
	const above = new Int32Array(count);
	const order = Int32Array.from({ length: count }, (_, i) => i);
	order.sort((i, j) => positions[3 * i] - positions[3 * j] || i - j);
	const square = wake.radius ** 2;
	for (let m = 0; m < count; m++) {
		const i = order[m];
		for (let n = m + 1; n < count; n++) {
			const j = order[n];
			const across = positions[3 * j] - positions[3 * i];
			if (across > wake.radius) break;
			const away = positions[3 * j + 1] - positions[3 * i + 1];
			if (across * across + away * away > square) continue;
			const up = positions[3 * j + 2] - positions[3 * i + 2];
			if (up === 0 || Math.abs(up) > wake.reach) continue;
			above[up > 0 ? i : j]++;
		}
	}
	return above;
}

/** How many places stand under another. */
export function countUnder(above: Int32Array): number {
	return above.reduce((sum, others) => sum + (others > 0 ? 1 : 0), 0);
}

/**
 * Every hold in which drones stand under others, in time.
 * @param placesOf 3·N metres of a formation with its reserve slots
 */
export function wakeHolds(show: Show, flight: ShowFlight, placesOf: (formation: string) => Float64Array): WakeHold[] {
	const launched = flight.legs.filter(({ id }) => id === "launch").at(-1)?.arrives ?? flight.begins;
	const leaves = flight.legs.find(({ id }) => id === "landing")?.departs ?? endOfShow(show, createBeatMap(show.grid));
	const holds: WakeHold[] = [];
	for (const stay of flight.stays) {
		const from = Math.max(stay.arrives, launched);
		const to = Math.min(stay.departs, leaves);
		if (to <= from) continue;
		const above = countAbove(placesOf(stay.formation), show.fleet.wake);
		const drones = countUnder(above);
		if (drones === 0) continue;
		let slot = 0;
		for (let i = 1; i < above.length; i++) if (above[i] > above[slot]) slot = i;
		const worst = { drone: stay.slotOfDrone.indexOf(slot), above: above[slot] };
		holds.push({ formation: stay.formation, cue: stay.cue, from, to, drones, worst });
	}
	return holds;
}
