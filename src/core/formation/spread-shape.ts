import type { Shape } from "../show/index.ts";
import { StarstaveError } from "../units/index.ts";
import { spreadHelix, spreadLine, spreadRing } from "./curves.ts";
import type { Measure } from "./measure.ts";
import { spreadDisc, spreadGrid, spreadSphere, spreadWave } from "./surfaces.ts";

/** Slots of a shape in its own frame, with what the shape itself knows of colours and groups. */
export interface Spread {
	/** 3·M metres. */
	readonly positions: Float64Array;
	/** #rrggbb a slot where the shape has colours. */
	readonly colours?: readonly (string | undefined)[];
	/** Name → slot indices, rising. */
	readonly groups?: ReadonlyMap<string, readonly number[]>;
}

/**
 * Spreads a shape's slots evenly in the measure of spacing. Every length of the result grows in proportion to the
 * shape's own lengths, so its gap does too: that is what sizing rests on.
 * @throws StarstaveError for a drawing whose path data can't be read and for text without a letter
 */
export function spreadShape(shape: Shape, measure: Measure): Spread {
	switch (shape.kind) {
		case "points":
			return { positions: Float64Array.from(shape.points.flat()) };
		case "grid":
			return { positions: spreadGrid(shape.columns, shape.rows, shape.layers, shape.pitch, measure) };
		case "wave":
			return { positions: spreadWave(shape.columns, shape.rows, shape.pitch, shape.rise, shape.wavelength) };
		case "line":
			return { positions: spreadLine(shape.count, shape.length) };
		case "ring":
			return { positions: spreadRing(shape.count, shape.radius, measure) };
		case "disc":
			return { positions: spreadDisc(shape.count, shape.radius, measure) };
		case "sphere":
			return { positions: spreadSphere(shape.count, shape.radius, measure) };
		case "helix":
			return { positions: spreadHelix(shape.count, shape.radius, shape.height, shape.turns, measure) };
		case "text":
		case "drawing":
			throw new StarstaveError("formation", `A ${shape.kind} can't be spread yet.`);
	}
}
