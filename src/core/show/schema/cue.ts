import * as v from "valibot";
import { paint } from "./paint.ts";
import { between, flag, id, number, text } from "./scalars.ts";

/** What every cue has. `at` and `length` in beats; `pinned` holds it to a time in seconds whatever the grid does. */
const every = {
	id,
	number: text,
	at: number,
	length: v.optional(between(0, 100000), 0),
	group: v.optional(text, "all"),
	called: v.optional(flag, false),
	pinned: v.optional(between(-600, 100000)),
	name: v.optional(text, ""),
	note: v.optional(text, ""),
};

const transition = v.looseObject({
	...every,
	kind: v.literal("transition"),
	formation: id,
	timeLaw: v.optional(v.picklist(["s-curve", "minimum-jerk"], "must be s-curve or minimum-jerk"), "s-curve"),
	light: v.optional(v.picklist(["keep", "dim", "dark", "crossfade"], "must be keep, dim, dark or crossfade"), "keep"),
});
const colourCue = v.looseObject({
	...every,
	kind: v.literal("colour"),
	paint,
	fade: v.optional(between(0, 100000), 0),
});
const intensityCue = v.looseObject({
	...every,
	kind: v.literal("intensity"),
	/** Linear light 0..1, or a curve of the music mapped from its 0..1 to from..to. */
	level: v.union(
		[between(0, 1), v.looseObject({ follow: text, from: between(0, 1), to: between(0, 1) })],
		"must be a number from 0 to 1, or { follow, from, to }",
	),
	fade: v.optional(between(0, 100000), 0),
});

export const cue = v.variant(
	"kind",
	[transition, colourCue, intensityCue],
	"must be one of transition, colour, intensity",
);
export type Cue = v.InferOutput<typeof cue>;
export type TransitionCue = Extract<Cue, { kind: "transition" }>;
export type ColourCue = Extract<Cue, { kind: "colour" }>;
export type IntensityCue = Extract<Cue, { kind: "intensity" }>;
