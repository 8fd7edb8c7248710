import * as v from "valibot";
import { above, between, number, pair, triple, whole } from "./scalars.ts";
import { place, shape } from "./shape.ts";

/** m/s, m/s², m/s³, m, share, s. Defaults: common practice, no source. */
export const limits = v.looseObject({
	horizontal: v.optional(above(0, 100), 6),
	climb: v.optional(above(0, 100), 3),
	descent: v.optional(above(0, 100), 2),
	acceleration: v.optional(above(0, 100), 3),
	jerk: v.optional(above(0, 1000), 10),
	spacing: v.optional(above(0, 100), 1.5),
	/** Vertical spacing is spacing × downwash. */
	downwash: v.optional(between(1, 20), 2),
	endurance: v.optional(above(0, 86400), 900),
	reserve: v.optional(between(0, 0.95), 0.25),
});
/**
 * How a drone follows its path: a second-order response with integral action and a delay in its loop. Hz, –, s, s,
 * share by which the drones of a fleet differ. Defaults: common practice, no source.
 */
export const tracking = v.looseObject({
	frequency: v.optional(between(0.05, 10), 0.8),
	damping: v.optional(between(0.1, 5), 0.8),
	/** Seconds in which it makes up for a steady push. */
	recovery: v.optional(between(0.1, 1000), 2),
	delay: v.optional(between(0, 2), 0.05),
	spread: v.optional(between(0, 0.5), 0.1),
});
/** The air that a drone throws down, as an upright cylinder below it, m. Defaults: common practice, no source. */
export const wake = v.looseObject({
	radius: v.optional(between(0, 100), 0.5),
	reach: v.optional(between(0, 200), 8),
});
export const fleet = v.looseObject({
	count: whole(0, 20000),
	spares: v.optional(whole(0, 20000), 0),
	mass: v.optional(above(0, 1000), 0.5),
	positionError: v.optional(between(0, 100), 0.1),
	/** m/s at which its drag bears its weight: how fast it falls in the end with its motors dead. */
	terminalSpeed: v.optional(between(1, 200), 15),
	tracking: v.optional(tracking, {}),
	wake: v.optional(wake, {}),
	limits: v.optional(limits, {}),
});
export const box = v.looseObject({ min: triple, max: triple });
export const venue = v.looseObject({
	volume: v.optional(box, { min: [-100, 0, 0], max: [100, 120, 120] }),
	buffer: v.optional(between(0, 10000), 10),
	audience: v.optional(v.nullable(v.looseObject({ from: pair, to: pair })), null),
	seat: v.optional(triple, [0, -60, 1.6]),
	loudspeaker: v.optional(triple, [0, -50, 4]),
	blocked: v.optional(v.array(box), []),
	wind: v.optional(between(0, 60), 0),
	/** m/s by which a gust is faster than the wind. */
	gust: v.optional(between(0, 60), 3),
});
/** The take-off grid. `waves` leave `interval` seconds apart, straight up to `climbTo` metres. */
export const takeoff = v.looseObject({
	shape,
	place: v.optional(place, {}),
	waves: v.optional(whole(1, 100), 1),
	interval: v.optional(between(0, 600), 5),
	climbTo: v.optional(number, 8),
});

export type Limits = v.InferOutput<typeof limits>;
export type Tracking = v.InferOutput<typeof tracking>;
export type Wake = v.InferOutput<typeof wake>;
export type Fleet = v.InferOutput<typeof fleet>;
export type Box = v.InferOutput<typeof box>;
export type Venue = v.InferOutput<typeof venue>;
export type Takeoff = v.InferOutput<typeof takeoff>;
