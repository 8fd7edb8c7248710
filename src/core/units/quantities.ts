/**
 * Branded scalars. They stand at the borders of the core so that a beat can't be handed in for a second; elements of
 * typed arrays stay plain numbers whose unit is said where the array is allocated.
 */
declare const unit: unique symbol;
type Quantity<U extends string> = number & { readonly [unit]?: U };

/** Seconds from the soundtrack's first decoded sample (may be negative: launch comes before the music). */
export type Seconds = Quantity<"s">;
/** A position or a length in the music, in beats from the first beat; may have a fraction. */
export type Beats = Quantity<"beat">;
/** Metres in the show frame: x to the audience's right, y away from the audience, z up. */
export type Metres = Quantity<"m">;
/** Cycles or samples a second. */
export type Hertz = Quantity<"Hz">;
/** Loudness in LUFS as ITU-R BS.1770 defines it. */
export type Lufs = Quantity<"LUFS">;
