import * as v from "valibot";
import { above, between, colour, id, text, triple, whole } from "./scalars.ts";

/**
 * Shapes of formations in their own frame, centred on the origin: x right, y away, z up, metres. Flat pictures (ring,
 * disc, text, drawing) stand upright in the x–z plane, facing the audience; a grid lies flat, its layers stacked.
 */
const slots = whole(1, 20000);
const length = above(0, 10000);

const points = v.looseObject({
	kind: v.literal("points"),
	points: v.pipe(v.array(triple), v.minLength(1, "must hold at least one point"), v.maxLength(20000)),
});
const grid = v.looseObject({
	kind: v.literal("grid"),
	columns: whole(1, 1000),
	rows: whole(1, 1000),
	layers: v.optional(whole(1, 1000), 1),
	pitch: length,
});
const line = v.looseObject({ kind: v.literal("line"), count: slots, length: between(0, 10000) });
const ring = v.looseObject({ kind: v.literal("ring"), count: slots, radius: length });
const disc = v.looseObject({ kind: v.literal("disc"), count: slots, radius: length });
const sphere = v.looseObject({ kind: v.literal("sphere"), count: slots, radius: length });
const helix = v.looseObject({
	kind: v.literal("helix"),
	count: slots,
	radius: length,
	height: between(0, 10000),
	turns: above(0, 1000),
});
const wave = v.looseObject({
	kind: v.literal("wave"),
	columns: whole(1, 1000),
	rows: whole(1, 1000),
	pitch: length,
	/** Crest above the middle, m. */
	rise: between(0, 1000),
	/** From crest to crest, m. */
	wavelength: length,
});
const letters = v.looseObject({
	kind: v.literal("text"),
	text: v.pipe(text, v.minLength(1, "must hold at least one letter"), v.maxLength(200)),
	/** Of a capital letter, m. */
	height: length,
	count: slots,
	style: v.optional(v.picklist(["outline", "filled"], "must be outline or filled"), "outline"),
});
const drawing = v.looseObject({
	kind: v.literal("drawing"),
	/** Path data as SVG writes it, in the drawing's own units, y down. */
	paths: v.pipe(
		v.array(v.looseObject({ d: text, colour: v.optional(colour), name: v.optional(text) })),
		v.minLength(1, "must hold at least one path"),
	),
	/** Of the whole drawing, m. */
	height: length,
	count: slots,
	style: v.optional(v.picklist(["outline", "filled"], "must be outline or filled"), "outline"),
});

export const shape = v.variant(
	"kind",
	[points, grid, line, ring, disc, sphere, helix, wave, letters, drawing],
	"must be one of points, grid, line, ring, disc, sphere, helix, wave, text, drawing",
);

/** Scale, then tilt about x, then turn about z (degrees), then move (metres). */
export const place = v.looseObject({
	position: v.optional(triple, [0, 0, 0]),
	turn: v.optional(between(-3600, 3600), 0),
	tilt: v.optional(between(-3600, 3600), 0),
	scale: v.optional(above(0, 1000), 1),
});

export const formation = v.looseObject({
	id,
	name: v.optional(text, ""),
	shape,
	place: v.optional(place, {}),
	/** One a slot. */
	colours: v.optional(v.array(colour)),
	/** Name → slot indices from 0. */
	groups: v.optional(v.record(text, v.array(whole(0, 20000)))),
});

export type Shape = v.InferOutput<typeof shape>;
export type Place = v.InferOutput<typeof place>;
export type Formation = v.InferOutput<typeof formation>;
