import * as v from "valibot";
import { above, between, colour } from "./scalars.ts";

/** How a colour is spread over a group and how it moves. Lengths in metres, times in beats. */
const axis = v.picklist(["right", "away", "up", "out"], "must be right, away, up or out");

const flat = v.looseObject({ kind: v.literal("flat"), colour });
const gradient = v.looseObject({ kind: v.literal("gradient"), from: colour, to: colour, axis: v.optional(axis, "up") });
/** A band of `colour` travels along the axis over `background`, once from end to end in `every` beats. */
const band = v.looseObject({
	kind: v.literal("band"),
	colour,
	background: v.optional(colour, "#000000"),
	axis: v.optional(axis, "right"),
	/** Share of the group's extent. */
	width: v.optional(above(0, 10), 0.3),
	every: v.optional(above(0, 10000), 4),
});
/** Slots take the colours in turn; every `every` beats each slot takes the next one. 0: they stay. */
const interleave = v.looseObject({
	kind: v.literal("interleave"),
	colours: v.pipe(v.array(colour), v.minLength(2, "must hold at least two colours"), v.maxLength(64)),
	every: v.optional(between(0, 10000), 0),
});
/** In each stretch of `every` beats a share of the slots, other ones each time, lights up in `colour` and fades. */
const glint = v.looseObject({
	kind: v.literal("glint"),
	colour,
	background: v.optional(colour, "#000000"),
	share: v.optional(between(0, 1), 0.15),
	every: v.optional(above(0, 10000), 1),
});
/** Brightness breathes between `floor` and 1, full on each pulse, falling until the next. */
const swell = v.looseObject({
	kind: v.literal("swell"),
	colour,
	every: v.optional(above(0, 10000), 1),
	floor: v.optional(between(0, 1), 0.35),
});
/** The formation's own colours. */
const picture = v.looseObject({ kind: v.literal("picture") });

export const paint = v.variant(
	"kind",
	[flat, gradient, band, interleave, glint, swell, picture],
	"must be one of flat, gradient, band, interleave, glint, swell, picture",
);
export type Paint = v.InferOutput<typeof paint>;
