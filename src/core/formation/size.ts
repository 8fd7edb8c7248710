import { smallestGap } from "../maths/index.ts";
import type { Limits, Shape } from "../show/index.ts";
import { SPACING_HAIR, StarstaveError } from "../units/index.ts";
import { createMeasure } from "./measure.ts";
import { spreadShape } from "./spread-shape.ts";

/** A shape with all its lengths multiplied; counts, turns, letters and paths stay. */
export function stretchShape(shape: Shape, factor: number): Shape {
	switch (shape.kind) {
		case "points":
			return {
				...shape,
				points: shape.points.map(([x, y, z]): [number, number, number] => [x * factor, y * factor, z * factor]),
			};
		case "grid":
			return { ...shape, pitch: shape.pitch * factor };
		case "wave":
			return {
				...shape,
				pitch: shape.pitch * factor,
				rise: shape.rise * factor,
				wavelength: shape.wavelength * factor,
			};
		case "line":
			return { ...shape, length: shape.length * factor };
		case "ring":
		case "disc":
		case "sphere":
			return { ...shape, radius: shape.radius * factor };
		case "helix":
			return { ...shape, radius: shape.radius * factor, height: shape.height * factor };
		case "text":
		case "drawing":
			return { ...shape, height: shape.height * factor };
	}
}

/**
 * The shape at the size where its two nearest slots are `margin` times the fleet's spacing apart, with a hair more so
 * that rounding to millimetres after any turn can't bring them below it. Larger and smaller shapes both come to that
 * size; proportions stay.
 * @param limits spacing in m and downwash of the fleet
 * @param margin from 1: 1 is as small as may be flown; √2 lets straight flights pass without conflict
 * @param tilt degrees, of the place the formation will stand in
 * @returns the shape itself where it has fewer than two slots
 * @throws StarstaveError where two slots stand on one place, since no size parts them
 */
export function sizeToSpacing(shape: Shape, limits: Pick<Limits, "spacing" | "downwash">, margin = 1, tilt = 0): Shape {
	// A line of length 0 has a direction all the same.
	const whole: Shape = shape.kind === "line" && shape.length === 0 ? { ...shape, length: 1 } : shape;
	const measure = createMeasure(limits.downwash, tilt);
	const gap = smallestGap(tiltSlots(spreadShape(whole, measure).positions, tilt), limits.downwash).distance;
	if (gap === Number.POSITIVE_INFINITY) return shape;
	if (gap < 1e-9)
		throw new StarstaveError(
			"formation",
			"Two slots of the formation stand on the same place, so no size keeps them apart; move or remove one of them.",
		);
	return stretchShape(whole, (limits.spacing * margin + SPACING_HAIR) / gap);
}

/** Turned about x as the formation's place will turn it; nothing else of a place changes which pair is nearest. */
function tiltSlots(positions: Float64Array, tilt: number): Float64Array {
	const cos = Math.cos((tilt * Math.PI) / 180);
	const sin = Math.sin((tilt * Math.PI) / 180);
	const out = positions.slice();
	for (let i = 0; i < out.length; i += 3) {
		out[i + 1] = positions[i + 1] * cos - positions[i + 2] * sin;
		out[i + 2] = positions[i + 1] * sin + positions[i + 2] * cos;
	}
	return out;
}
