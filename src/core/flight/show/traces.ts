/**
 * What the fleet does over the time of one transition (or of launch, or landing): speed, climb, acceleration, height and
 * gap at evenly spaced instants, from the exact derivatives of the paths that are flown. For the eye: what counts is the
 * proof, which knows every instant and not these alone.
 */
import { smallestGap } from "../../maths/index.ts";
import type { Limits } from "../../show/index.ts";
import { lawDuration } from "../law/time-law.ts";
import type { TimeLaw } from "../plan.ts";
import { GROUND_HEIGHT } from "../proof/waves.ts";
import type { Leg } from "../show-flight.ts";

/** Where the fleet is, and its first three derivatives by time: 3·N numbers each, m, m/s, m/s², m/s³. */
export interface FleetMotion {
	readonly position: Float64Array;
	readonly velocity: Float64Array;
	readonly acceleration: Float64Array;
	readonly jerk: Float64Array;
}

/** One quantity over time: S numbers each. */
export interface Trace {
	/** Over the fleet at each instant. */
	readonly least: Float64Array;
	readonly most: Float64Array;
	/** Of the drone that comes nearest to its limit. */
	readonly worst: Float64Array;
	/** That drone, from 0. */
	readonly drone: number;
}

export interface LegTraces {
	/** S seconds of the show. */
	readonly times: Float64Array;
	/** m/s; climb is positive upwards. */
	readonly horizontal: Trace;
	readonly climb: Trace;
	/** m/s². */
	readonly acceleration: Trace;
	/** m above the ground. */
	readonly height: Trace;
	/** S metres in the measure of spacing; Infinity where fewer than two drones are off the ground. */
	readonly gap: Float64Array;
}

export function createMotion(drones: number): FleetMotion {
	const row = (): Float64Array => new Float64Array(3 * drones);
	return { position: row(), velocity: row(), acceleration: row(), jerk: row() };
}

/** The motion of every drone at `time`, seconds of the show, into `out`; at rest in its end slot outside of the leg. */
export function motionAt(leg: Leg, time: number, out: FleetMotion): void {
	const { plan, rowOfDrone, delays } = leg;
	const { degree, paths, law } = plan;
	const width = degree + 1;
	let longest = 0;
	if (delays !== null) for (const delay of delays) longest = Math.max(longest, delay);
	const duration = leg.arrives - leg.departs - longest;
	for (let drone = 0; drone < rowOfDrone.length; drone++) {
		const row = rowOfDrone[drone];
		const since = time - leg.departs - (delays === null ? 0 : delays[row]);
		const [s, s1, s2, s3] = lawRates(law, since, duration);
		for (let axis = 0; axis < 3; axis++) {
			const start = (3 * row + axis) * width;
			let [value, d1, d2, d3] = [0, 0, 0, 0];
			for (let k = degree; k >= 0; k--) {
				d3 = d3 * s + d2;
				d2 = d2 * s + d1;
				d1 = d1 * s + value;
				value = value * s + paths[start + k];
			}
			d2 *= 2;
			d3 *= 6;
			const at = 3 * drone + axis;
			out.position[at] = value;
			out.velocity[at] = d1 * s1;
			out.acceleration[at] = d2 * s1 * s1 + d1 * s2;
			out.jerk[at] = d3 * s1 ** 3 + 3 * d2 * s1 * s2 + d1 * s3;
		}
	}
}

/** s and its derivatives by time where the law is flown in `duration` seconds. */
function lawRates(law: TimeLaw, since: number, duration: number): [number, number, number, number] {
	const own = lawDuration(law);
	if (since >= duration || own === 0 || duration <= 0) return [since >= duration ? 1 : 0, 0, 0, 0];
	if (since < 0) return [0, 0, 0, 0];
	const pace = own / duration;
	const t = since * pace;
	let piece = 0;
	while (piece + 2 < law.borders.length && t >= law.borders[piece + 1]) piece++;
	const c = law.coefficients.subarray(6 * piece, 6 * piece + 6);
	const u = t - law.borders[piece];
	return [
		c[0] + u * (c[1] + u * (c[2] + u * (c[3] + u * (c[4] + u * c[5])))),
		pace * (c[1] + u * (2 * c[2] + u * (3 * c[3] + u * (4 * c[4] + u * 5 * c[5])))),
		pace ** 2 * (2 * c[2] + u * (6 * c[3] + u * (12 * c[4] + u * 20 * c[5]))),
		pace ** 3 * (6 * c[3] + u * (24 * c[4] + u * 60 * c[5])),
	];
}

/** Largest share of its limits that one drone takes up: over 1 it is too fast. */
export function limitShare(motion: FleetMotion, drone: number, limits: Limits): number {
	const [vx, vy, vz] = motion.velocity.subarray(3 * drone, 3 * drone + 3);
	return Math.max(
		Math.hypot(vx, vy) / limits.horizontal,
		vz / limits.climb,
		-vz / limits.descent,
		sizeOf(motion.acceleration, drone) / limits.acceleration,
		sizeOf(motion.jerk, drone) / limits.jerk,
	);
}

/** How much longer than it is flown the drone's motion would have to take at this instant: over 1 it is too fast. */
function timeShare(motion: FleetMotion, drone: number, limits: Limits): number {
	const [vx, vy, vz] = motion.velocity.subarray(3 * drone, 3 * drone + 3);
	const speed = Math.max(Math.hypot(vx, vy) / limits.horizontal, vz / limits.climb, -vz / limits.descent);
	return Math.max(speed, Math.sqrt(sizeOf(motion.acceleration, drone) / limits.acceleration));
}

/**
 * @param legs of one id, in the order of time: a transition has one, launch and landing have several
 * @param samples instants, from 2
 */
export function traceLegs(legs: readonly Leg[], limits: Limits, samples = 121): LegTraces {
	const drones = legs[0].rowOfDrone.length;
	const begins = legs[0].departs;
	const ends = legs[legs.length - 1].arrives;
	const times = Float64Array.from({ length: samples }, (_, k) => begins + ((ends - begins) * k) / (samples - 1));
	const motion = createMotion(drones);
	const gap = new Float64Array(samples);
	// One value of every drone at every instant: the worst drone is only known when all have been seen.
	const rows = {
		horizontal: new Float64Array(samples * drones),
		climb: new Float64Array(samples * drones),
		acceleration: new Float64Array(samples * drones),
		height: new Float64Array(samples * drones),
	};
	times.forEach((time, k) => {
		const leg = legs.findLast((one) => one.departs <= time) ?? legs[0];
		motionAt(leg, time, motion);
		const aloft: number[] = [];
		for (let drone = 0; drone < drones; drone++) {
			const at = k * drones + drone;
			const { position, velocity } = motion;
			rows.horizontal[at] = Math.hypot(velocity[3 * drone], velocity[3 * drone + 1]);
			rows.climb[at] = velocity[3 * drone + 2];
			rows.acceleration[at] = sizeOf(motion.acceleration, drone);
			rows.height[at] = position[3 * drone + 2];
			if (position[3 * drone + 2] > GROUND_HEIGHT) aloft.push(...position.subarray(3 * drone, 3 * drone + 3));
		}
		gap[k] = smallestGap(aloft, limits.downwash).distance;
	});
	const trace = (values: Float64Array, share: (value: number) => number): Trace =>
		traceOf(values, drones, samples, share);
	return {
		times,
		horizontal: trace(rows.horizontal, (value) => value),
		climb: trace(rows.climb, (value) => Math.max(value / limits.climb, -value / limits.descent)),
		acceleration: trace(rows.acceleration, (value) => value),
		height: trace(rows.height, (value) => value),
		gap,
	};
}

function traceOf(values: Float64Array, drones: number, samples: number, share: (value: number) => number): Trace {
	const least = new Float64Array(samples).fill(Number.POSITIVE_INFINITY);
	const most = new Float64Array(samples).fill(Number.NEGATIVE_INFINITY);
	let [nearest, worstDrone] = [Number.NEGATIVE_INFINITY, 0];
	for (let k = 0; k < samples; k++) {
		for (let drone = 0; drone < drones; drone++) {
			const value = values[k * drones + drone];
			if (value < least[k]) least[k] = value;
			if (value > most[k]) most[k] = value;
			if (share(value) > nearest + 1e-9) [nearest, worstDrone] = [share(value), drone];
		}
	}
	const worst = Float64Array.from({ length: samples }, (_, k) => values[k * drones + worstDrone]);
	return { least, most, worst, drone: worstDrone };
}

/**
 * The instant at which some drone takes up most of what it may do, looked for at so many instants. Speed and acceleration
 * are compared by the time that they ask for (more time lowers an acceleration by its square); jerk, which is at its
 * limit whenever anything begins, says nothing about where a flight is tight.
 */
export function busiestMoment(legs: readonly Leg[], limits: Limits, samples = 61): { time: number; drone: number } {
	const motion = createMotion(legs[0].rowOfDrone.length);
	let [most, time, busiest] = [-1, legs[0].departs, 0];
	for (const leg of legs) {
		for (let k = 0; k < samples; k++) {
			const at = leg.departs + ((leg.arrives - leg.departs) * k) / (samples - 1);
			motionAt(leg, at, motion);
			for (let drone = 0; drone < leg.rowOfDrone.length; drone++) {
				const share = timeShare(motion, drone, limits);
				if (share > most + 1e-9) [most, time, busiest] = [share, at, drone];
			}
		}
	}
	return { time, drone: busiest };
}

function sizeOf(values: Float64Array, drone: number): number {
	return Math.hypot(values[3 * drone], values[3 * drone + 1], values[3 * drone + 2]);
}
