import type { Shape } from "../show/index.ts";
import { StarstaveError } from "../units/index.ts";
import { extentOf, FLATNESS, type Ink, readContours, spreadInk } from "./ink.ts";
import type { Measure } from "./measure.ts";
import type { Spread } from "./spread-shape.ts";

/**
 * A drawing's paths where they stand, the whole scaled to the shape's height. Each named path is a group; paths of one
 * name share it. Slots take their path's colour.
 * @throws StarstaveError where a path can't be read or nothing is drawn
 */
export function spreadDrawing(shape: Extract<Shape, { kind: "drawing" }>, measure: Measure): Spread {
	// Once coarsely for the size, then as finely as that size asks for.
	const size = sizeOf(shape.paths.flatMap(({ d }) => readContours(d, 1, 1)));
	if (size === 0)
		throw new StarstaveError(
			"formation",
			"The drawing's paths draw nothing, so they give no slots; one needs a length.",
		);
	const inks: Ink[] = shape.paths.map(({ d, colour, name }) => ({
		contours: readContours(d, 1 / size, FLATNESS),
		colour,
		groups: name === undefined || name === "" || name === "all" ? [] : [name],
	}));
	const [, bottom, , top] = extentOf(inks.flatMap((ink) => ink.contours)) ?? [0, 0, 0, 1];
	// A level line has no height: its length is taken for it.
	const height = top - bottom > 1e-9 ? shape.height / (top - bottom) : shape.height;
	return spreadInk(inks, shape.count, shape.style, height, measure);
}

/** The larger side of the box about the contours. */
function sizeOf(contours: Parameters<typeof extentOf>[0]): number {
	const extent = extentOf(contours);
	return extent === null ? 0 : Math.max(extent[2] - extent[0], extent[3] - extent[1]);
}
