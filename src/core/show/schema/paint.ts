import * as v from "valibot";
import { above, between, colour } from "./scalars.ts";

/** How a colour is spread over a group and how it moves. Lengths in metres, times in beats. */
const axis = v.picklist(["right", "away", "up", "out"], "must be right, away, up or out");

const flat = v.looseObject({ kind: v.literal("flat"), colour });
const gradient = v.looseObject({ kind: v.literal("gradient"), from: colour, to: colour, axis: v.optional(axis, "up") });
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
	[flat, gradient, swell, picture],
	"must be one of flat, gradient, swell, picture",
);
export type Paint = v.InferOutput<typeof paint>;
