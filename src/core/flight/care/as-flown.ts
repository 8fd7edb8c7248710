import { createRandom, pairsWithin } from "../../maths/index.ts";
import type { Fleet, Show, Tracking } from "../../show/index.ts";
import type { Leg, ShowFlight } from "../show-flight.ts";
import { GRAVITY } from "./fall.ts";
import { delayMargin, Followers, farthestOff, type Loop, stepFor } from "./follower.ts";
import { motionOnLeg } from "./motion.ts";

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
	const loops = loopsOf(fleet, flight.drones);
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
		legs.push(followLeg(leg, flight.drones, loops, Math.min(AFTER, next - leg.arrives), fleet, push));
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

/** No two drones are alike: each is quicker or slower than the mean by up to the spread, always the same way. */
function loopsOf({ tracking }: Fleet, drones: number): Loop[] {
	const random = createRandom(SEED);
	return Array.from({ length: drones }, () => loopOf(tracking, 1 + tracking.spread * (2 * random.next() - 1)));
}

function followLeg(
	leg: Leg,
	drones: number,
	loops: readonly Loop[],
	after: number,
	fleet: Fleet,
	push: number,
): LegAsFlown {
	const { downwash } = fleet.limits;
	const path = new Float64Array(3 * drones);
	const unused = new Float64Array(3 * drones);
	motionOnLeg(leg, drones, 0, path, unused);
	const asked = stepFor(Math.max(...loops.map(({ omega }) => omega)));
	const between = Math.max(1, Math.ceil(1 / (RATE * asked)));
	const step = 1 / (RATE * between);
	const followers = new Followers(loops, path, step);
	const before = path.slice();
	const duration = leg.arrives - leg.departs;
	let lag = { distance: 0, time: leg.departs, drone: 0 };
	let [atArrival, settled] = [0, 0];
	const nearest = new Nearest(downwash, fleet.limits.spacing);
	const instants = Math.ceil((duration + after) * RATE);
	for (let instant = 0; instant < instants; instant++) {
		for (let part = 0; part < between; part++) {
			motionOnLeg(leg, drones, (instant * between + part) * step, path, unused);
			followers.advance(path, null);
		}
		const since = (instant + 1) / RATE;
		motionOnLeg(leg, drones, since, path, unused);
		const off = farthestOf(followers.positions, path);
		if (off.distance > lag.distance) lag = { ...off, time: leg.departs + since };
		if (since <= duration + 1e-9) atArrival = off.distance;
		if (since >= duration && off.distance > NEAR) settled = since - duration;
		nearest.look(before, followers.positions, since - 1 / RATE, 1 / RATE);
		before.set(followers.positions);
	}
	const gap = nearest.found === null ? null : { ...nearest.found, time: leg.departs + nearest.found.time };
	return { id: leg.id, lag, atArrival, settled, gap, gapInGust: gap && Math.max(0, gap.distance - push) };
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
		const { downwash } = this;
		const apart = (at: Float64Array, axis: number): number =>
			(at[3 * j + axis] - at[3 * i + axis]) / (axis === 2 ? downwash : 1);
		const [ux, uy, uz] = [apart(from, 0), apart(from, 1), apart(from, 2)];
		const [vx, vy, vz] = [apart(to, 0) - ux, apart(to, 1) - uy, apart(to, 2) - uz];
		const square = vx * vx + vy * vy + vz * vz;
		const s = square === 0 ? 0 : Math.min(1, Math.max(0, -(ux * vx + uy * vy + uz * vz) / square));
		const distance = Math.hypot(ux + s * vx, uy + s * vy, uz + s * vz);
		if (distance < (this.found?.distance ?? Number.POSITIVE_INFINITY)) {
			this.found = { distance, time: since + s * span, drones: [i, j] };
		}
	}
}
