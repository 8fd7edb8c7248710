export type { Curve } from "./curve.ts";
export type { ColourCue, Cue, IntensityCue, TransitionCue } from "./schema/cue.ts";
export type { Box, Fleet, Limits, Takeoff, Venue } from "./schema/fleet-venue.ts";
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
} from "./schema/show-file.ts";
export type { Grid, Ordered, Show } from "./show.ts";
export type { FleetSlots, Slots, Stay } from "./slots.ts";
