import type { StudioState } from "../app/index.ts";
import { dronePositions } from "../core/flight/index.ts";
import type { GroundMarks, NightMarks, NightViewpoint } from "../night/index.ts";

const NONE = { pair: null, troubled: [] } as const;
/** Seconds between the two instants that a speed is taken from. */
const STEP = 0.02;

/** What is marked at this instant; outlines on the ground are for the view from above. */
export function marksAt(
	state: StudioState,
	seconds: number,
	positions: Float32Array,
	viewpoint: NightViewpoint,
): NightMarks {
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
		breaks: zone !== null && ((zone.audience !== null && zone.audience.distance <= 0) || zone.border.distance < 0),
		border: [
			[x0, y0],
			[x1, y0],
			[x1, y1],
			[x0, y1],
		],
		audience: audience && [audience.from, audience.to],
	};
}

/** The closest pair of the selected transition while it is flown, and the drones that are too fast at this instant. */
function flightMarks(state: StudioState, seconds: number, positions: Float32Array): Omit<NightMarks, "ground"> {
	const { selection, check, flight, show } = state;
	if (selection.kind !== "cues" || selection.ids.length !== 1 || !check || !flight || !show) return NONE;
	const transition = check.transitions.find((one) => one.id === selection.ids[0]);
	if (!transition || seconds < transition.departs.time || seconds > transition.arrives.time) return NONE;
	const { limits } = show.fleet;
	const troubled: number[] = [];
	if (transition.verdicts.includes("too-fast")) {
		const later = new Float32Array(positions.length);
		dronePositions(flight, seconds + STEP, later);
		for (let drone = 0; drone < flight.drones; drone++) {
			const [dx, dy, dz] = [0, 1, 2].map((axis) => (later[3 * drone + axis] - positions[3 * drone + axis]) / STEP);
			if (Math.hypot(dx, dy) > limits.horizontal || dz > limits.climb || -dz > limits.descent) troubled.push(drone);
		}
	}
	if (!transition.gap) return { pair: null, troubled };
	const [a, b] = transition.gap.drones;
	const apart = [0, 1, 2].map((axis) => positions[3 * a + axis] - positions[3 * b + axis]);
	const distance = Math.hypot(apart[0], apart[1], apart[2] / limits.downwash);
	return { pair: { drones: [a, b], distance, breaks: distance < limits.spacing - 0.002 }, troubled };
}
