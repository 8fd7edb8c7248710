import type { Show } from "../show/index.ts";
import { createBeatMap, transitionsInTime } from "../show/index.ts";
import { SPACING_HAIR, StarstaveError } from "../units/index.ts";
import { createMeasure } from "./measure.ts";
import { placeSlots, toMillimetre } from "./place.ts";
import { boxOf } from "./reserve.ts";
import { slotsOf } from "./slots-of.ts";
import { spreadShape } from "./spread-shape.ts";

/**
 * Where each drone stands on the take-off grid: 3·N metres, drone after drone. The show's own grid if it has one;
 * else a square grid of spacing pitch on the ground under the opening formation, its rows along x.
 * @throws StarstaveError when the show's own grid has fewer slots than the fleet has drones
 */
export function takeoffSlots(show: Show): Float64Array {
	const { count, limits } = show.fleet;
	if (show.takeoff !== null) {
		const { shape, place } = show.takeoff;
		const slots = placeSlots(spreadShape(shape, createMeasure(limits.downwash, place.tilt)).positions, place);
		if (slots.length < 3 * count)
			throw new StarstaveError(
				"fleet",
				`The take-off grid has ${slots.length / 3} places for ${count} drones; it needs one for each.`,
			);
		return slots.slice(0, 3 * count);
	}
	const pitch = toMillimetre(limits.spacing + SPACING_HAIR);
	const columns = Math.ceil(Math.sqrt(count));
	const rows = Math.ceil(count / Math.max(1, columns));
	const [x0, y0] = underOpening(show, (columns - 1) * pitch, (rows - 1) * pitch);
	const ground = new Float64Array(3 * count);
	for (let i = 0; i < count; i++) {
		ground[3 * i] = toMillimetre(x0 + (i % columns) * pitch);
		ground[3 * i + 1] = toMillimetre(y0 + Math.floor(i / columns) * pitch);
		ground[3 * i + 2] = toMillimetre(Math.max(0, show.venue.volume.min[2]));
	}
	return ground;
}

/** Corner of the grid with the smallest x and y: centred under the opening formation, inside the venue if it fits. */
function underOpening(show: Show, width: number, depth: number): [number, number] {
	const { min, max } = show.venue.volume;
	const opening =
		show.opening ?? transitionsInTime(show, createBeatMap(show.grid))[0]?.formation ?? show.formations.order[0];
	let centre = [(min[0] + max[0]) / 2, (min[1] + max[1]) / 2];
	if (opening !== undefined) {
		const box = boxOf(slotsOf(show.formations.byId[opening], show.fleet.limits.downwash).positions);
		centre = [(box.min[0] + box.max[0]) / 2, (box.min[1] + box.max[1]) / 2];
	}
	const within = (middle: number, size: number, least: number, most: number): number =>
		Math.max(least, Math.min(middle - size / 2, most - size));
	return [within(centre[0], width, min[0], max[0]), within(centre[1], depth, min[1], max[1])];
}
