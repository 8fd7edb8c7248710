import type { Box, Limits } from "../show/index.ts";

/** What one leg asks of the planner: plain data that crosses to a worker. */
export interface LegProblem {
	/** A transition cue's id, "launch" or "landing". */
	readonly id: string;
	/** Hash of all that the plan depends on: equal keys, equal plans. */
	readonly key: string;
	/** `climb` and `descend` go straight up and down over the take-off grid. */
	readonly kind: "transition" | "climb" | "descend";
	/** Formation ids; "take-off grid" on the ground. */
	readonly fromFormation: string;
	readonly toFormation: string;
	/** 3·N metres each. */
	readonly from: Float64Array;
	readonly to: Float64Array;
	/** N entries: where each start slot must go; null: whatever is best. */
	readonly target: Int32Array | null;
	/** N entries: seconds that each start slot waits; null: all leave at once. */
	readonly delays: Float64Array | null;
	readonly limits: Limits;
	/** Flight volume with floor and ceiling, m. */
	readonly volume: Box;
	readonly blocked: readonly Box[];
	readonly timeLaw: "s-curve" | "minimum-jerk";
	/** Seconds between departure and arrival, null: as long as it takes; not part of the key. */
	readonly available: number | null;
}

/** Told how far a plan has come: share 0..1 and a word on what is being done. */
export type PlanProgress = (share: number, stage: string) => void;
