import { smallestGap } from "../../maths/index.ts";
import type { Box, Limits, Venue } from "../../show/index.ts";
import { GAP_TOLERANCE, TIGHT_SHARE } from "../../units/index.ts";
import type { FormationCheck } from "../check.ts";
import type { Verdict } from "../plan.ts";

/** Metres: last bits of float64 at the walls of a volume, which formations may touch. */
const WALL = 1e-6;

/**
 * Whether a fleet can stand in these slots: their own gap, and their place in the venue.
 * @param positions 3·N metres, reserve slots included
 */
export function checkSlots(
	positions: Float64Array,
	limits: Limits,
	venue: Pick<Venue, "volume" | "blocked">,
): Pick<FormationCheck, "gap" | "verdicts"> {
	const gap = smallestGap(positions, limits.downwash).distance;
	const verdicts: Verdict[] = [];
	if (gap < limits.spacing - GAP_TOLERANCE) verdicts.push("too-close");
	let outside = false;
	for (let k = 0; k < positions.length && !outside; k += 3) outside = isOutside(positions, k, venue);
	if (outside) verdicts.push("out-of-venue");
	if (verdicts.length === 0) {
		verdicts.push("flies");
		if (gap < (1 + TIGHT_SHARE) * limits.spacing) verdicts.push("tight");
	}
	return { gap, verdicts };
}

/** Whether the slot whose x stands at `k` is outside the flight volume or inside a blocked one. */
export function isOutside(positions: Float64Array, k: number, venue: Pick<Venue, "volume" | "blocked">): boolean {
	const within = (box: Box, wall: number): boolean =>
		[0, 1, 2].every((axis) => {
			const value = positions[k + axis];
			return value >= box.min[axis] - wall && value <= box.max[axis] + wall;
		});
	return !within(venue.volume, WALL) || venue.blocked.some((box) => within(box, -WALL));
}
