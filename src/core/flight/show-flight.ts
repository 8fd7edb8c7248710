import type { Stay } from "../show/index.ts";
import type { Plan } from "./plan.ts";

/** One stretch of flight of the whole fleet, in show time. Between legs the fleet holds. */
export interface Leg {
	/** A transition cue's id, "launch" or "landing". */
	readonly id: string;
	/** Seconds of the show (launch ends before 0). */
	readonly departs: number;
	readonly arrives: number;
	readonly plan: Plan;
	/** N entries: the start slot (row of the plan) that drone i flies. */
	readonly rowOfDrone: Int32Array;
	/** Seconds that each drone waits before it leaves (waves of launch and landing); null: all leave at once. */
	readonly delays: Float64Array | null;
}

/** Where every drone is over launch, show and landing: what preview, light, proof and hand-off read. */
export interface ShowFlight {
	/** N. */
	readonly drones: number;
	readonly legs: readonly Leg[];
	/** Formation after formation, the opening first. */
	readonly stays: readonly Stay[];
	/** Seconds: motors start, and the last drone is down. */
	readonly begins: number;
	readonly ends: number;
	/** 3·N metres on the take-off grid. */
	readonly ground: Float64Array;
}
