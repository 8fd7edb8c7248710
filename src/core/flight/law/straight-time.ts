import type { Limits } from "../../show/index.ts";

/** What a law in s may do: ṡ, |s̈| and |s⃛|, in 1/s, 1/s², 1/s³. */
export interface RateLimits {
	readonly speed: number;
	readonly acceleration: number;
	readonly jerk: number;
}

/**
 * Shortest time from rest to rest over `distance` with a jerk-limited S-curve (seven phases; closed forms as in Biagiotti
 * & Melchiorri, Trajectory Planning for Automatic Machines and Robots, 2008, §3.4).
 * @param distance m (or 1, for a law in s)
 * @returns s
 */
export function sCurveTime(distance: number, { speed: v, acceleration: a, jerk: j }: RateLimits): number {
	if (distance <= 0) return 0;
	const unlimited = 4 * Math.cbrt(distance / (2 * j));
	if (v * j >= a * a) {
		if (distance >= v * (v / a + a / j)) return distance / v + v / a + a / j;
		if (distance >= (2 * a * a * a) / (j * j)) return a / j + Math.sqrt((a * a) / (j * j) + (4 * distance) / a);
		return unlimited;
	}
	const rise = Math.sqrt(v / j);
	return distance >= 2 * v * rise ? distance / v + 2 * rise : unlimited;
}

/** Peaks of a minimum-jerk move of 1 in 1 s (Flash & Hogan 1985): speed, acceleration, jerk. */
export const MINIMUM_JERK_PEAKS = { speed: 15 / 8, acceleration: 10 / Math.sqrt(3), jerk: 60 } as const;

/** Shortest time from rest to rest over `distance` with minimum jerk, s. */
export function minimumJerkTime(distance: number, { speed, acceleration, jerk }: RateLimits): number {
	if (distance <= 0) return 0;
	return Math.max(
		(MINIMUM_JERK_PEAKS.speed * distance) / speed,
		Math.sqrt((MINIMUM_JERK_PEAKS.acceleration * distance) / acceleration),
		Math.cbrt((MINIMUM_JERK_PEAKS.jerk * distance) / jerk),
	);
}

/** Highest speed along a straight line in a direction under the limits by direction, m/s. */
export function speedAlong(x: number, y: number, z: number, limits: Limits): number {
	const distance = Math.sqrt(x * x + y * y + z * z);
	const level = Math.sqrt(x * x + y * y);
	let speed = Infinity;
	if (level > 0) speed = (limits.horizontal * distance) / level;
	if (z > 0) speed = Math.min(speed, (limits.climb * distance) / z);
	else if (z < 0) speed = Math.min(speed, (limits.descent * distance) / -z);
	return speed;
}

/** Time of one drone's straight flight by (x, y, z) metres, alone and on its own S-curve, s. */
export function straightTime(x: number, y: number, z: number, limits: Limits): number {
	const distance = Math.sqrt(x * x + y * y + z * z);
	if (distance === 0) return 0;
	return sCurveTime(distance, {
		speed: speedAlong(x, y, z, limits),
		acceleration: limits.acceleration,
		jerk: limits.jerk,
	});
}
