import { createRandom, pairsWithin } from "../../maths/index.ts";
import type { Fleet, Show, Tracking } from "../../show/index.ts";
import { lawAt, lawDuration } from "../law/time-law.ts";
import type { Leg, ShowFlight } from "../show-flight.ts";
import { GRAVITY } from "./fall.ts";
import { delayMargin, Followers, farthestOff, type Loop, stepFor } from "./follower.ts";

/** One transition as drones fly it that follow their paths with a lag. */
export interface LegAsFlown {
	/** The transition cue's id. */
	readonly id: string;
	/** Farthest that a drone is from where its path says, m; seconds of the show; drones from 0. */
	readonly lag: { readonly distance: number; readonly time: number; readonly drone: number };
	/** Farthest that a drone is from its slot at the arrival, m, and seconds after it until all stand within `near`. */
	readonly atArrival: number;
	readonly settled: number;
	/** Smallest distance of two drones in the measure of spacing, m; null where none come within twice the spacing. */
	readonly gap: { readonly distance: number; readonly time: number; readonly drones: readonly [number, number] } | null;
	/** The same where a gust pushes one of the two towards the other and spares the other, m. */
	readonly gapInGust: number | null;
}

/** The fleet as flown: an estimate from a model of how drones follow their paths. */
export interface AsFlown {
	readonly legs: readonly LegAsFlown[];
	/** Seconds that a drone of the fleet's mean lags a path of steady speed: 2ζ/ω. */
	readonly lag: number;
	/** Metres that a gust takes a drone off its place. */
	readonly push: number;
	/** Seconds of delay that the loop can bear. */
	readonly delayMargin: number;
	/** False where the delay is more than the loop can bear: then nothing was followed and `legs` is empty. */
	readonly steady: boolean;
	/** Metres within which a drone counts as in its slot. */
	readonly near: number;
	/** Instants a second at which gaps were looked at; between two of them drones are taken to move straight. */
	readonly rate: number;
}

/** Instants a second. */
const RATE = 10;
/** Metres. */
const NEAR = 0.25;
/** Seconds after the arrival for which the drones are followed, if the hold lasts that long. */
const AFTER = 5;
const SEED = 20;

/** Every transition of a show as flown; launch and landing are slow and not followed. */
export function flyAsFollowed(show: Show, flight: ShowFlight): AsFlown {
	const { fleet, venue } = show;
	const loops = loopsOf(fleet);
	const kinds = kindsOf(flight.drones);
	const mean = loopOf(fleet.tracking, 1);
	const slowest = loopOf(fleet.tracking, 1 - fleet.tracking.spread);
	const quickest = loopOf(fleet.tracking, 1 + fleet.tracking.spread);
	const margin = delayMargin(quickest);
	const steady = fleet.tracking.delay < margin;
	const push = steady ? farthestOff(slowest, gustPush(venue.wind, venue.gust, fleet.terminalSpeed)) : 0;
	const legs: LegAsFlown[] = [];
	flight.legs.forEach((leg, k) => {
		if (!steady || leg.id === "launch" || leg.id === "landing") return;
		const next = flight.legs[k + 1]?.departs ?? flight.ends;
		legs.push(followLeg(leg, kinds, loops, Math.min(AFTER, next - leg.arrives), fleet, push));
	});
	return {
		legs,
		lag: (2 * mean.damping) / mean.omega,
		push,
		delayMargin: margin,
		steady,
		near: NEAR,
		rate: RATE,
	};
}

/** m/s² that a gust adds to what the wind pushes already, by the drag of `fall.ts`. */
export function gustPush(wind: number, gust: number, terminalSpeed: number): number {
	return (GRAVITY * ((wind + gust) ** 2 - wind ** 2)) / terminalSpeed ** 2;
}

function loopOf({ frequency, damping, recovery, delay }: Tracking, quicker: number): Loop {
	return { omega: 2 * Math.PI * frequency * quicker, damping, integral: 1 / recovery, delay };
}

/** Drones differ: each is quicker or slower than the mean by up to the spread, in one of so many kinds. */
const KINDS = 9;

function loopsOf({ tracking }: Fleet): Loop[] {
	return Array.from({ length: KINDS }, (_, kind) =>
		loopOf(tracking, 1 + tracking.spread * ((2 * kind) / (KINDS - 1) - 1)),
	);
}

/** N: the kind of each drone, by chance, always the same way. */
function kindsOf(drones: number): Uint8Array {
	const random = createRandom(SEED);
	return Uint8Array.from({ length: drones }, () => random.below(KINDS));
}

/**
 * A path is a polynomial in s and a follower is linear, so what a drone does is the same polynomial in what its kind
 * makes of s, s² and so on: a few signals are followed instead of every axis of every drone.
 */
function followLeg(
	leg: Leg,
	kinds: Uint8Array,
	loops: readonly Loop[],
	after: number,
	fleet: Fleet,
	push: number,
): LegAsFlown {
	const { plan } = leg;
	const duration = leg.arrives - leg.departs;
	const pace = duration > 0 ? lawDuration(plan.law) / duration : 0;
	const sAt = (since: number): number => (since >= duration ? 1 : lawAt(plan.law, since * pace));
	const asked = stepFor(Math.max(...loops.map(({ omega }) => omega)));
	const between = Math.max(1, Math.ceil(1 / (RATE * asked)));
	const step = 1 / (RATE * between);
	const { degree } = plan;
	// KINDS × degree: s, s², … as each kind should follow them.
	const powers = new Float64Array(KINDS * degree);
	const raise = (s: number): void => {
		for (let k = 0; k < powers.length; k++) powers[k] = k % degree === 0 ? s : powers[k - 1] * s;
	};
	const followers = new Followers(loops, powers, step);
	const path = new Float64Array(3 * kinds.length);
	lay(leg, kinds, powers, path);
	const flown = path.slice();
	const before = path.slice();
	let lag = { distance: 0, time: leg.departs, drone: 0 };
	let [atArrival, settled] = [0, 0];
	const nearest = new Nearest(fleet.limits.downwash, fleet.limits.spacing);
	const instants = Math.ceil((duration + after) * RATE);
	for (let instant = 0; instant < instants; instant++) {
		for (let part = 0; part < between; part++) {
			raise(sAt((instant * between + part) * step));
			followers.advance(powers, null);
		}
		const since = (instant + 1) / RATE;
		raise(sAt(since));
		lay(leg, kinds, powers, path);
		lay(leg, kinds, followers.positions, flown);
		const off = farthestOf(flown, path);
		if (off.distance > lag.distance) lag = { ...off, time: leg.departs + since };
		if (since <= duration + 1e-9) atArrival = off.distance;
		if (since >= duration && off.distance > NEAR) settled = since - duration;
		nearest.look(before, flown, since - 1 / RATE, 1 / RATE);
		before.set(flown);
	}
	const gap = nearest.found === null ? null : { ...nearest.found, time: leg.departs + nearest.found.time };
	return { id: leg.id, lag, atArrival, settled, gap, gapInGust: gap && Math.max(0, gap.distance - push) };
}

/** Where the fleet is with these powers of s for each kind of drone, into `out`: 3·N metres, drone after drone. */
function lay({ plan, rowOfDrone }: Leg, kinds: Uint8Array, powers: Float64Array, out: Float64Array): void {
	const { degree, paths } = plan;
	for (let drone = 0; drone < kinds.length; drone++) {
		const own = kinds[drone] * degree - 1;
		for (let axis = 0; axis < 3; axis++) {
			const start = (3 * rowOfDrone[drone] + axis) * (degree + 1);
			let value = paths[start];
			for (let k = 1; k <= degree; k++) value += paths[start + k] * powers[own + k];
			out[3 * drone + axis] = value;
		}
	}
}

function farthestOf(positions: Float64Array, path: Float64Array): { distance: number; drone: number } {
	let [most, drone] = [0, 0];
	for (let k = 0; k < path.length; k += 3) {
		const off = Math.hypot(positions[k] - path[k], positions[k + 1] - path[k + 1], positions[k + 2] - path[k + 2]);
		if (off > most) [most, drone] = [off, k / 3];
	}
	return { distance: most, drone };
}

/** The closest two drones of a leg; between two instants each is taken to move straight. */
class Nearest {
	found: { distance: number; time: number; drones: readonly [number, number] } | null = null;
	private readonly downwash: number;
	private readonly spacing: number;

	constructor(downwash: number, spacing: number) {
		this.downwash = downwash;
		this.spacing = spacing;
	}

	look(from: Float64Array, to: Float64Array, since: number, span: number): void {
		if (from.length < 6) return;
		// Pairs further apart than this at the start of the span can't become the closest by its end.
		let moved = 0;
		for (let k = 0; k < from.length; k += 3) {
			const up = (to[k + 2] - from[k + 2]) / this.downwash;
			moved = Math.max(moved, Math.hypot(to[k] - from[k], to[k + 1] - from[k + 1], up));
		}
		const sight = Math.min(this.found?.distance ?? 2 * this.spacing, 2 * this.spacing) + 2 * moved;
		const pairs = pairsWithin(from, this.downwash, sight);
		for (let k = 0; k < pairs.length; k += 2) this.lookAt(pairs[k], pairs[k + 1], from, to, since, span);
	}

	private lookAt(i: number, j: number, from: Float64Array, to: Float64Array, since: number, span: number): void {
		const [a, b] = [3 * i, 3 * j];
		const ux = from[b] - from[a];
		const uy = from[b + 1] - from[a + 1];
		const uz = (from[b + 2] - from[a + 2]) / this.downwash;
		const vx = to[b] - to[a] - ux;
		const vy = to[b + 1] - to[a + 1] - uy;
		const vz = (to[b + 2] - to[a + 2]) / this.downwash - uz;
		const square = vx * vx + vy * vy + vz * vz;
		const s = square === 0 ? 0 : Math.min(1, Math.max(0, -(ux * vx + uy * vy + uz * vz) / square));
		const distance = Math.hypot(ux + s * vx, uy + s * vy, uz + s * vz);
		if (distance < (this.found?.distance ?? Number.POSITIVE_INFINITY)) {
			this.found = { distance, time: since + s * span, drones: [i, j] };
		}
	}
}
