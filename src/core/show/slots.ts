/** The slots of one formation in the venue: what `formation` makes and `flight` and `light` use. */
export interface Slots {
	/** M, the number of slots of the picture itself. */
	readonly count: number;
	/** 3·M numbers, metres in the show frame, x y z of slot after slot, rounded to whole millimetres. */
	readonly positions: Float64Array;
	/** 3·M bytes, sRGB of slot after slot; null where the formation has no colours of its own. */
	readonly colours: Uint8Array | null;
	/** Name → slot indices from 0, rising. `all` is not in here: it always exists. */
	readonly groups: ReadonlyMap<string, Int32Array>;
}

/**
 * A formation filled up to the fleet: slots 0..M−1 are the picture's, M..N−1 are reserve slots in which dark drones
 * hold. Every transition flies between two of these.
 */
export interface FleetSlots extends Slots {
	/** N, drones in the air. */
	readonly fleet: number;
	/** 3·N numbers, metres: the picture's slots, then the reserve slots. */
	readonly all: Float64Array;
}

/** A stretch of the show in which the fleet stands in one formation. */
export interface Stay {
	/** The formation's id. */
	readonly formation: string;
	/** Seconds: when the fleet has arrived, and when it leaves. −Infinity for the opening, +Infinity for the last. */
	readonly arrives: number;
	readonly departs: number;
	/** The transition cue that brought the fleet here; null for the opening. */
	readonly cue: string | null;
	/** N entries: slot of each drone; ≥ M is a reserve slot, so the drone is dark. */
	readonly slotOfDrone: Int32Array;
}
