import type { TimeLaw } from "../plan.ts";
import { lawOfPhases, type Phase } from "./phases.ts";
import type { RateLimits } from "./straight-time.ts";
import { sCurveLaw } from "./time-law.ts";

/**
 * A law for coming down: fast at first, then at a slower rate through the last part, and to rest. Every change of speed
 * is an S-curve of limited acceleration and jerk.
 * @param rates of the fast part, in s
 * @param slow ṡ of the last part
 * @param share how much of the way is the last part, 0..1
 */
export function descentLaw(rates: RateLimits, slow: number, share: number): TimeLaw {
	const { acceleration: a, jerk: j } = rates;
	const room = 1 - share;
	const used = (top: number): number => change(0, top, a, j).distance + change(top, slow, a, j).distance;
	if (rates.speed <= slow || share >= 1 || used(slow) >= room) {
		return sCurveLaw({ ...rates, speed: Math.min(slow, rates.speed) });
	}
	// The fastest first part that still leaves room to slow down: used() rises with the speed.
	let top = rates.speed;
	if (used(top) > room) {
		let low = slow;
		for (let step = 0; step < 60; step++) {
			const middle = (low + top) / 2;
			if (used(middle) > room) top = middle;
			else low = middle;
		}
		top = low;
	}
	const stop = change(slow, 0, a, j);
	// Too little left to stop in at that rate: the whole way down is slow.
	if (stop.distance > share) return sCurveLaw({ ...rates, speed: slow });
	const phases = [
		...change(0, top, a, j).phases,
		{ length: (room - used(top)) / top, jerk: 0 },
		...change(top, slow, a, j).phases,
		{ length: (share - stop.distance) / slow, jerk: 0 },
		...stop.phases,
	];
	return lawOfPhases(phases);
}

/** From one speed to another: three phases of constant jerk (two where acceleration isn't reached). */
function change(from: number, to: number, a: number, j: number): { phases: Phase[]; distance: number } {
	const size = Math.abs(to - from);
	const sign = to >= from ? 1 : -1;
	const reached = size * j >= a * a;
	const jerkPhase = reached ? a / j : Math.sqrt(size / j);
	const pushPhase = reached ? size / a - a / j : 0;
	const phases = [
		{ length: jerkPhase, jerk: sign * j },
		{ length: pushPhase, jerk: 0 },
		{ length: jerkPhase, jerk: -sign * j },
	];
	return { phases, distance: ((from + to) / 2) * (2 * jerkPhase + pushPhase) };
}
