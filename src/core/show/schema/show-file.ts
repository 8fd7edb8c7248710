import * as v from "valibot";
import { cue } from "./cue.ts";
import { fleet, takeoff, venue } from "./fleet-venue.ts";
import { above, id, number, text, whole } from "./scalars.ts";
import { formation } from "./shape.ts";

export const SHOW_FORMAT = "starstave-show";
export const SHOW_VERSION = 1;

export const soundtrack = v.looseObject({
	/** Base name only. */
	file: v.pipe(text, v.regex(/^[^/\\]+$/, "must be a file's base name, without folders")),
	sha256: v.pipe(text, v.regex(/^[0-9a-f]{64}$/, "must be 64 hexadecimal digits")),
	duration: above(0, 86400),
	sampleRate: above(0, 1e6),
	channels: whole(1, 64),
});
export const bar = v.looseObject({ beat: whole(0, 1e6), beatsPerBar: whole(1, 1000) });
export const grid = v.looseObject({
	/** Seconds, strictly rising. */
	beats: v.optional(v.array(number), []),
	/** One entry for every bar, rising. */
	bars: v.optional(v.array(bar), []),
	source: v.optional(v.picklist(["analysed", "edited"], "must be analysed or edited"), "analysed"),
	/** Indices of beats that were set by hand: what is moved beside them stops there. */
	anchors: v.optional(v.array(whole(0, 1e6))),
});
export const section = v.looseObject({
	id,
	name: v.optional(text, ""),
	letter: v.optional(text, ""),
	from: number,
	to: number,
});
/** A cue that waits in the tray: its music is gone from the soundtrack, or it was taken out of the show for now. */
export const trayCue = v.looseObject({
	cue,
	/** Seconds in the soundtrack that it was made for, and that soundtrack's SHA-256 ("" where it had none). */
	time: number,
	soundtrack: v.optional(text, ""),
});
/** A cue that somebody should look at, and why. */
export const toReview = v.looseObject({ cue: id, reason: text });
export const group = v.looseObject({ id, name: text, drones: v.array(whole(0, 20000)) });

/** The whole document as it stands in `*.starstave.json`. */
export const showFile = v.looseObject({
	format: v.literal(SHOW_FORMAT, `must be "${SHOW_FORMAT}"`),
	version: v.literal(SHOW_VERSION, `must be ${SHOW_VERSION}`),
	title: v.optional(text, ""),
	notes: v.optional(text, ""),
	soundtrack: v.optional(v.nullable(soundtrack), null),
	grid: v.optional(grid, {}),
	sections: v.optional(v.array(section), []),
	fleet,
	venue: v.optional(venue, {}),
	takeoff: v.optional(v.nullable(takeoff), null),
	/** A formation's id: where the fleet waits, dark, when the music starts. */
	opening: v.optional(v.nullable(id), null),
	formations: v.optional(v.array(formation), []),
	groups: v.optional(v.array(group), []),
	cues: v.optional(v.array(cue), []),
	/** The tray. */
	orphans: v.optional(v.array(trayCue)),
	review: v.optional(v.array(toReview)),
	/** The soundtrack that this one is a new edit of. */
	retimedFrom: v.optional(soundtrack),
});

export type Soundtrack = v.InferOutput<typeof soundtrack>;
export type Bar = v.InferOutput<typeof bar>;
export type GridFile = v.InferOutput<typeof grid>;
export type Section = v.InferOutput<typeof section>;
export type DroneGroup = v.InferOutput<typeof group>;
export type TrayCue = v.InferOutput<typeof trayCue>;
export type ToReview = v.InferOutput<typeof toReview>;
export type ShowFile = v.InferOutput<typeof showFile>;
