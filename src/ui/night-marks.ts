import type { StudioState } from "../app/index.ts";
import { createMotion, limitShare, motionAt } from "../core/flight/index.ts";
import { GAP_TOLERANCE, LIMIT_TOLERANCE } from "../core/units/index.ts";
import type { GroundMarks, NightMarks, NightViewpoint } from "../night/index.ts";

const NONE = { pair: null, troubled: [] } as const;

/** What is marked at this instant; outlines on the ground are for the view from above. */
export function marksAt(
	state: StudioState,
	seconds: number,
	positions: Float32Array,
	viewpoint: NightViewpoint,
): Omit<NightMarks, "ghost"> {
	return { ...flightMarks(state, seconds, positions), ground: viewpoint === "plan" ? groundMarks(state) : null };
}

/** Fall zone, border and audience line. */
function groundMarks({ show, care }: StudioState): GroundMarks | null {
	if (!show) return null;
	const { volume, buffer, audience } = show.venue;
	const [x0, x1] = [volume.min[0] - buffer, volume.max[0] + buffer];
	const [y0, y1] = [volume.min[1] - buffer, volume.max[1] + buffer];
	const zone = care?.fallZone ?? null;
	return {
		zone: zone?.outline ?? null,
		breaks: zone !== null && ((zone.audience !== null && zone.audience.distance < buffer) || zone.border.distance < 0),
		border: [
			[x0, y0],
			[x1, y0],
			[x1, y1],
			[x0, y1],
		],
		audience: audience && [audience.from, audience.to],
	};
}

/**
 * The closest pair of the leg that is selected or looked into while it is flown, the drones over one of their limits at
 * this instant, and the one that leaves the venue.
 */
function flightMarks(
	state: StudioState,
	seconds: number,
	positions: Float32Array,
): Pick<NightMarks, "pair" | "troubled"> {
	const { selection, inquired, check, flight, show } = state;
	if (!check || !flight || !show || (selection.kind === "cues" && selection.ids.length > 1)) return NONE;
	const id = inquired?.part.kind === "leg" ? inquired.part.id : selection.kind === "cues" ? selection.ids[0] : null;
	const leg = [check.launch, ...check.transitions, check.landing].find((one) => one?.id === id);
	if (!leg || seconds < leg.departs.time || seconds > leg.arrives.time) return NONE;
	const { limits } = show.fleet;
	const troubled: number[] = [];
	const flown = flight.legs.findLast((one) => one.id === id && one.departs <= seconds);
	if (leg.verdicts.includes("too-fast") && flown !== undefined) {
		const motion = createMotion(flight.drones);
		motionAt(flown, seconds, motion);
		for (let drone = 0; drone < flight.drones; drone++) {
			if (limitShare(motion, drone, limits) > 1 + LIMIT_TOLERANCE) troubled.push(drone);
		}
	}
	if (leg.breach !== null && !troubled.includes(leg.breach.drone)) troubled.push(leg.breach.drone);
	if (!leg.gap) return { pair: null, troubled };
	const [a, b] = leg.gap.drones;
	const apart = [0, 1, 2].map((axis) => positions[3 * a + axis] - positions[3 * b + axis]);
	const distance = Math.hypot(apart[0], apart[1], apart[2] / limits.downwash);
	return { pair: { drones: [a, b], distance, breaks: distance < limits.spacing - GAP_TOLERANCE }, troubled };
}
