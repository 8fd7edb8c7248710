import type { Shape } from "../show/index.ts";
import { spreadHelix, spreadLine, spreadRing } from "./curves.ts";
import { spreadDrawing } from "./drawing.ts";
import { type Measure, uprightShare } from "./measure.ts";
import { spreadDisc, spreadGrid, spreadSphere, spreadWave } from "./surfaces.ts";
import { spreadText } from "./text.ts";

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
			return remember(shape, measure, () => spreadText(shape, measure));
		case "drawing":
			return remember(shape, measure, () => spreadDrawing(shape, measure));
	}
}

/**
 * Text and drawings take up to a second to spread, and every edit of a show asks for all formations again. Shapes are
 * never changed in place, so what one gave can be kept for as long as it lives.
 */
const remembered = new WeakMap<Shape, { share: number; spread: Spread }>();

function remember(shape: Shape, measure: Measure, spreadIt: () => Spread): Spread {
	const share = uprightShare(measure);
	const held = remembered.get(shape);
	if (held !== undefined && held.share === share) return held.spread;
	const spread = spreadIt();
	remembered.set(shape, { share, spread });
	return spread;
}
