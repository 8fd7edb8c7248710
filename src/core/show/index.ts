export { createShow } from "./create-show.ts";
export { compareNumbers, numberBetween } from "./cue-number.ts";
export { type CueTimes, cuePosition, cuesInTime, cueTimes, endOfShow, transitionsInTime } from "./cue-times.ts";
export type { Curve } from "./curve.ts";
export * from "./edits/index.ts";
export { type BarBeat, type BeatMap, createBeatMap, DEFAULT_BEAT_INTERVAL, DEFAULT_BEATS_PER_BAR } from "./grid.ts";
export { MIGRATION_STEPS, type MigrationStep, migrate, type RawShow, versionOf } from "./migrate.ts";
export { find, toList, toOrdered } from "./ordered.ts";
export { type PackedShow, packShow, unpackShow } from "./packed-show.ts";
export { readShow, toShow, toShowFile, writeShow } from "./read-show.ts";
export type { ColourCue, Cue, IntensityCue, TransitionCue } from "./schema/cue.ts";
export type { Box, Fleet, Limits, Takeoff, Tracking, Venue, Wake } from "./schema/fleet-venue.ts";
export type { Paint } from "./schema/paint.ts";
export type { Formation, Place, Shape } from "./schema/shape.ts";
export {
	type Bar,
	type DroneGroup,
	type GridFile,
	type Section,
	SHOW_FORMAT,
	SHOW_VERSION,
	type ShowFile,
	type Soundtrack,
	showFile,
	type ToReview,
	type TrayCue,
} from "./schema/show-file.ts";
export type { Grid, Ordered, Show } from "./show.ts";
export { slotCount } from "./slot-count.ts";
export type { FleetSlots, Slots, Stay } from "./slots.ts";
