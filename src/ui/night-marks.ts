import type { StudioState } from "../app/index.ts";
import { dronePositions } from "../core/flight/index.ts";
import type { NightMarks } from "../night/index.ts";

const NONE: NightMarks = { pair: null, troubled: [] };
/** Seconds between the two instants that a speed is taken from. */
const STEP = 0.02;

/** The closest pair of the selected transition while it is flown, and the drones that are too fast at this instant. */
export function marksAt(state: StudioState, seconds: number, positions: Float32Array): NightMarks {
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
