import type { Box, Limits } from "../../show/index.ts";
import { SPACING_HAIR } from "../../units/index.ts";

/**
 * The way back to each drone's own place. The fleet comes back over the take-off grid as it suits it best (a free,
 * exact assignment), which leaves the drones over each other's places. They are sorted in lanes: every drone rises
 * straight up to a height of its own lane, flies straight to above its own place, and comes straight down. Two drones
 * share a lane only if their straight flights, on one time law, keep spacing; lanes are a vertical spacing apart. So
 * the whole is separated by construction, and it is proven like any leg.
 */
export interface WayHome {
	/** 3·N metres, place after place: over the take-off grid, no two nearer than the spacing, whatever the grid's pitch. */
	readonly wide: Float64Array;
	/** 3·N, place after place: above where the drones are, each in its lane. */
	readonly risen: Float64Array;
	/** 3·N, place after place: in the same lanes, above where they belong. */
	readonly crossed: Float64Array;
	/** N: the place that the drone over place p belongs to. */
	readonly target: Int32Array;
}

/** Horizontal room that two drones in one lane keep over the spacing, m: rounding to millimetres on both sides. */
const HAIR = 4 * SPACING_HAIR;
/** The grid above is drawn wider by this much at a time until the lanes fit under the ceiling. */
const WIDER = 1.3;
const MOST_WIDER = 12;

/**
 * Where the fleet gathers when it comes back: the stack's places, drawn apart about their middle as far as spacing
 * wants it and `times` WIDER.
 */
export function gatherWide(stack: Float64Array, limits: Limits, times: number): Float64Array {
	const count = stack.length / 3;
	let [x, y] = [0, 0];
	for (let i = 0; i < count; i++) {
		x += stack[3 * i] / count;
		y += stack[3 * i + 1] / count;
	}
	const nearest = nearestAcross(stack);
	const need = nearest > 0 ? Math.max(1, (limits.spacing + HAIR) / nearest) : 1;
	const factor = need * WIDER ** times;
	if (factor === 1) return stack;
	return stack.map((value, k) => {
		if (k % 3 === 2) return value;
		const middle = k % 3 === 0 ? x : y;
		return Math.round((middle + factor * (value - middle)) * 1000) / 1000;
	});
}

/** Smallest horizontal distance between two places, m; 0 with fewer than two. */
function nearestAcross(places: Float64Array): number {
	const order = Array.from({ length: places.length / 3 }, (_, i) => i).sort((a, b) => places[3 * a] - places[3 * b]);
	let best = Number.POSITIVE_INFINITY;
	for (let m = 0; m < order.length; m++) {
		for (let n = m + 1; n < order.length; n++) {
			const across = places[3 * order[n]] - places[3 * order[m]];
			if (across >= best) break;
			best = Math.min(best, Math.hypot(across, places[3 * order[n] + 1] - places[3 * order[m] + 1]));
		}
	}
	return Number.isFinite(best) ? best : 0;
}

/**
 * How much wider the gathering must be so that the lanes fit under the ceiling. It depends on the fleet alone, not on
 * who must change places with whom, so the way to the gathering can be planned before that is known: a random exchange
 * needs about 0.6 lanes for each drone that a crossing flight passes.
 * @returns the number of times WIDER
 */
export function widerTimes(stack: Float64Array, limits: Limits, space: Box): number {
	const count = stack.length / 3;
	const rise = laneRise(limits);
	let base = 0;
	for (let i = 0; i < count; i++) base = Math.max(base, stack[3 * i + 2]);
	const room = Math.max(1, Math.floor((space.max[2] - base) / rise) - 1);
	const side = Math.sqrt(count);
	for (let times = 0; times < MOST_WIDER; times++) {
		// Half a grid's side of flight, two spacings wide, over drones one pitch apart.
		const passed = (0.52 * side * 2) / WIDER ** times;
		if (0.6 * passed + 3 <= room) return times;
	}
	return MOST_WIDER;
}

/** Metres from lane to lane. */
function laneRise(limits: Limits): number {
	return Math.ceil((limits.spacing * limits.downwash + HAIR * limits.downwash) * 1000) / 1000;
}

/**
 * @param wide 3·N metres
 * @param droneAt N: which drone is over place p; drone i belongs over place i
 * @returns null when every drone is over its own place already
 */
export function sortInLanes(wide: Float64Array, droneAt: Int32Array, limits: Limits): WayHome | null {
	const count = droneAt.length;
	if (droneAt.every((drone, place) => drone === place)) return null;
	let base = Number.NEGATIVE_INFINITY;
	for (let i = 0; i < count; i++) base = Math.max(base, wide[3 * i + 2]);
	const lanes = colourFlights(wide, droneAt, limits.spacing + HAIR);
	const rise = laneRise(limits);
	const risen = wide.slice();
	const crossed = wide.slice();
	for (let place = 0; place < count; place++) {
		const height = Math.round((base + lanes[place] * rise) * 1000) / 1000;
		risen[3 * place + 2] = height;
		crossed[3 * droneAt[place] + 2] = height;
	}
	return { wide, risen, crossed, target: droneAt.slice() };
}

/**
 * A lane for each flight, from 0, so that flights of one lane keep `apart`: greedy, longest flight first, ties by
 * index. Flights are straight and on one time law, so two of them come nearest as the origin to a segment.
 */
function colourFlights(wide: Float64Array, droneAt: Int32Array, apart: number): Int32Array {
	const count = droneAt.length;
	const x0 = (p: number) => wide[3 * p];
	const y0 = (p: number) => wide[3 * p + 1];
	const x1 = (p: number) => wide[3 * droneAt[p]];
	const y1 = (p: number) => wide[3 * droneAt[p] + 1];
	const length = Float64Array.from({ length: count }, (_, p) => Math.hypot(x1(p) - x0(p), y1(p) - y0(p)));
	const order = Array.from({ length: count }, (_, p) => p).sort((a, b) => length[b] - length[a] || a - b);
	const lanes = new Int32Array(count).fill(-1);
	const members: number[][] = [];
	const meet = (p: number, q: number): boolean => {
		const [ux, uy] = [x0(q) - x0(p), y0(q) - y0(p)];
		const [vx, vy] = [x1(q) - x1(p) - ux, y1(q) - y1(p) - uy];
		const square = vx * vx + vy * vy;
		const s = square === 0 ? 0 : Math.min(1, Math.max(0, -(ux * vx + uy * vy) / square));
		return Math.hypot(ux + s * vx, uy + s * vy) < apart;
	};
	for (const p of order) {
		let lane = 0;
		while (members[lane]?.some((q) => meet(p, q))) lane++;
		members[lane] ??= [];
		members[lane].push(p);
		lanes[p] = lane;
	}
	return lanes;
}
