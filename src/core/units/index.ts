export type { Beats, Hertz, Lufs, Metres, Seconds } from "./quantities.ts";
export { type ErrorArea, requireInRange, StarstaveError } from "./starstave-error.ts";
export { GAP_TOLERANCE, LIMIT_TOLERANCE, SPACING_HAIR, TIGHT_SHARE } from "./tolerances.ts";
