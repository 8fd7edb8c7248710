import type { Limits } from "../../show/index.ts";
import type { TimeLaw } from "../plan.ts";
import { descentLaw } from "./descent-law.ts";
import { lawOfKind, standingLaw } from "./time-law.ts";

/** Metres over the ground from which a landing drone goes slowly, and how fast (common practice, no source). */
export const LAST_METRES = 4;
export const LAST_METRES_SPEED = 0.5;
/** m/s: landing is slower than the show's own descent (common practice, no source). */
export const LANDING_SPEED = 1.5;

/** Law of a climb off the take-off grid or of the way down to it, shared by all layers. */
export function verticalLaw(
	kind: "climb" | "descend",
	from: Float64Array,
	to: Float64Array,
	limits: Limits,
	timeLaw: TimeLaw["kind"],
): TimeLaw {
	let highest = 0;
	let lowest = Infinity;
	for (let k = 2; k < from.length; k += 3) {
		const way = Math.abs(to[k] - from[k]);
		highest = Math.max(highest, way);
		if (way > 0) lowest = Math.min(lowest, way);
	}
	if (highest === 0) return standingLaw(timeLaw);
	const rates = { acceleration: limits.acceleration / highest, jerk: limits.jerk / highest };
	if (kind === "climb") return lawOfKind(timeLaw, { speed: limits.climb / highest, ...rates });
	// Every layer goes the last metres slowly: the lowest layer has the largest share of its way there.
	const speed = Math.min(limits.descent, LANDING_SPEED) / highest;
	return descentLaw({ speed, ...rates }, Math.min(limits.descent, LAST_METRES_SPEED) / highest, LAST_METRES / lowest);
}
