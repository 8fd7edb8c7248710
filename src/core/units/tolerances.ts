/**
 * Named tolerances, each with its reason. One a quantity; nothing else in the program is forgiven.
 */

/** Metres. Slots are rounded to whole millimetres, which can move a gap by √3 mm; stated in every report. */
export const GAP_TOLERANCE = 0.002;

/** Metres. Formations are placed with a hair to spare so that rounding to millimetres can't break spacing. */
export const SPACING_HAIR = 0.0012;

/** Share of a limit. Peaks are proven by interval arithmetic in float64; this covers its last bits and no more. */
export const LIMIT_TOLERANCE = 1e-6;

/** Share of the time, or of the spacing, below which a verdict is `tight`. */
export const TIGHT_SHARE = 0.1;
