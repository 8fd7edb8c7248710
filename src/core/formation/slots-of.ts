import type { Formation, Slots } from "../show/index.ts";
import { packColours } from "./colours.ts";
import { createMeasure, DEFAULT_DOWNWASH } from "./measure.ts";
import { placeSlots } from "./place.ts";
import { spreadShape } from "./spread-shape.ts";

/**
 * The slots of a formation in the venue: spread evenly in the measure of spacing, scaled, tilted, turned, moved, and
 * rounded to whole millimetres. Colours and groups that the formation names win over those its shape brings along
 * (paths of a drawing; letters and words of a text).
 * @param downwash the fleet's, since upright rows stand that much further apart
 * @throws StarstaveError for a drawing or a text that gives no slots
 */
export function slotsOf(formation: Formation, downwash = DEFAULT_DOWNWASH): Slots {
	const { shape, place } = formation;
	const spread = spreadShape(shape, createMeasure(downwash, place.tilt));
	const positions = placeSlots(spread.positions, place);
	const count = positions.length / 3;
	const groups = new Map<string, Int32Array>();
	for (const [name, slots] of spread.groups ?? []) groups.set(name, Int32Array.from(slots));
	for (const [name, slots] of Object.entries(formation.groups ?? {}))
		groups.set(name, Int32Array.from([...new Set(slots)].filter((slot) => slot < count)).sort());
	return { count, positions, colours: packColours(formation.colours ?? spread.colours, count), groups };
}
