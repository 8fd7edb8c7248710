import { lawAt, lawDuration } from "../law/time-law.ts";
import type { TimeLaw } from "../plan.ts";
import type { Leg, ShowFlight } from "../show-flight.ts";

const LAW_WIDTH = 6;

/** ṡ in 1/s at `time` seconds from departure in the law's own duration; 0 before and after. */
function lawRateAt(law: TimeLaw, time: number): number {
	const { borders, coefficients } = law;
	const pieces = borders.length - 1;
	if (pieces === 0 || time <= 0 || time >= borders[pieces]) return 0;
	let piece = 0;
	while (time >= borders[piece + 1]) piece++;
	const t = time - borders[piece];
	let rate = 0;
	for (let k = LAW_WIDTH - 1; k >= 1; k--) rate = rate * t + k * coefficients[piece * LAW_WIDTH + k];
	return rate;
}

/** Seconds that the longest-waiting drone of a leg waits, and seconds that each is on its way. */
export function wavesOf(leg: Leg): { readonly longest: number; readonly moving: number } {
	let longest = 0;
	if (leg.delays !== null) for (const delay of leg.delays) longest = Math.max(longest, delay);
	return { longest, moving: leg.arrives - leg.departs - longest };
}

/**
 * Where the fleet is and how fast, from the coefficients of the plan: no difference of samples.
 * @param since seconds from the leg's departure
 * @param positions,velocities 3·N, m and m/s, drone after drone
 */
export function motionOnLeg(
	leg: Leg,
	drones: number,
	since: number,
	positions: Float64Array,
	velocities: Float64Array,
): void {
	const { plan, rowOfDrone, delays } = leg;
	const { moving } = wavesOf(leg);
	const own = lawDuration(plan.law);
	const width = plan.degree + 1;
	const pace = moving > 0 ? own / moving : 0;
	const lawOf = (wait: number): readonly [number, number] => {
		const time = since - wait;
		if (time >= moving) return [1, 0];
		return [lawAt(plan.law, time * pace), lawRateAt(plan.law, time * pace) * pace];
	};
	const together = lawOf(0);
	for (let drone = 0; drone < drones; drone++) {
		const row = rowOfDrone[drone];
		const [s, rate] = delays === null ? together : lawOf(delays[row]);
		for (let axis = 0; axis < 3; axis++) {
			const start = (3 * row + axis) * width;
			let value = 0;
			let slope = 0;
			for (let k = plan.degree; k >= 0; k--) {
				slope = slope * s + value;
				value = value * s + plan.paths[start + k];
			}
			positions[3 * drone + axis] = value;
			velocities[3 * drone + axis] = slope * rate;
		}
	}
}

/**
 * Shows the whole flight, instant after instant, no further apart than `step` seconds on each leg, ends included. While
 * the fleet stands nothing changes, so holds are covered by the ends of their legs.
 */
export function forEachInstant(
	flight: ShowFlight,
	step: number,
	visit: (time: number, positions: Float64Array, velocities: Float64Array) => void,
): void {
	const positions = new Float64Array(3 * flight.drones);
	const velocities = new Float64Array(3 * flight.drones);
	for (const leg of flight.legs) {
		const span = leg.arrives - leg.departs;
		const steps = Math.max(1, Math.ceil(span / step));
		for (let k = 0; k <= steps; k++) {
			const since = (span * k) / steps;
			motionOnLeg(leg, flight.drones, since, positions, velocities);
			visit(leg.departs + since, positions, velocities);
		}
	}
}
