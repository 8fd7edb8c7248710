import type { Show, Wake } from "../../show/index.ts";
import { createBeatMap, endOfShow } from "../../show/index.ts";
import { GROUND } from "../show/leg-problems.ts";
import type { Leg, ShowFlight } from "../show-flight.ts";
import { motionOnLeg, wavesOf } from "./motion.ts";

/** A hold in which drones stand in the wake of others: the air that those throw down. */
export interface WakeHold {
	/** Over the take-off grid, where the waves of launch gather or those of landing wait, or in the show. */
	readonly where: "launch" | "show" | "landing";
	/** The formation's id, "take-off grid" over that; the cue that brought the fleet there, null for the opening. */
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
 * Visits every two places of which one is under the other: by no more than the wake's reach, and no further aside than
 * its radius. The wake is taken as an upright cylinder; wind that carries it aside and its widening are left out.
 * @param positions 3·N metres
 */
function forEachUnder(positions: Float64Array, wake: Wake, visit: (under: number, over: number) => void): void {
	const count = positions.length / 3;
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
			if (up > 0) visit(i, j);
			else visit(j, i);
		}
	}
}

/** For each place how many others it stands under; @param positions 3·N metres */
export function countAbove(positions: Float64Array, wake: Wake): Int32Array {
	const above = new Int32Array(positions.length / 3);
	forEachUnder(positions, wake, (under) => {
		above[under]++;
	});
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
	const first = flight.legs.find(({ delays }) => delays !== null);
	const last = flight.legs.findLast(({ delays }) => delays !== null);
	const gathering = first?.id === "launch" ? waitOverGrid(first, flight.drones, show.fleet.wake) : null;
	if (gathering !== null) holds.push(gathering);
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
		holds.push({ where: "show", formation: stay.formation, cue: stay.cue, from, to, drones, worst });
	}
	const waiting = last?.id === "landing" ? waitOverGrid(last, flight.drones, show.fleet.wake) : null;
	if (waiting !== null) holds.push(waiting);
	return holds;
}

/**
 * Waves wait over the take-off grid, one layer over the other: from when each is up until the last one is, and from
 * when the fleet is back until each goes down. The hold is that of the drone which stands longest in a wake.
 */
function waitOverGrid(leg: Leg, drones: number, wake: Wake): WakeHold | null {
	const { moving } = wavesOf(leg);
	const up = leg.id === "launch";
	const places = new Float64Array(3 * drones);
	motionOnLeg(leg, drones, up ? leg.arrives - leg.departs : 0, places, new Float64Array(3 * drones));
	const delayOf = (drone: number): number => leg.departs + (leg.delays?.[leg.rowOfDrone[drone]] ?? 0);
	const above = new Int32Array(drones);
	let hold = { from: 0, to: 0 };
	forEachUnder(places, wake, (under, over) => {
		const from = up ? Math.max(delayOf(under), delayOf(over)) + moving : leg.departs;
		const to = up ? leg.arrives : Math.min(delayOf(under), delayOf(over));
		if (to <= from) return;
		above[under]++;
		if (to - from > hold.to - hold.from) hold = { from, to };
	});
	const count = countUnder(above);
	if (count === 0) return null;
	let drone = 0;
	for (let i = 1; i < drones; i++) if (above[i] > above[drone]) drone = i;
	const where = up ? "launch" : "landing";
	return { where, formation: GROUND, cue: null, ...hold, drones: count, worst: { drone, above: above[drone] } };
}
