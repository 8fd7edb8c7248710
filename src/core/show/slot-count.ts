import type { Shape } from "./schema/shape.ts";

/** How many slots a shape asks for, from its parameters alone. */
export function slotCount(shape: Shape): number {
	switch (shape.kind) {
		case "points":
			return shape.points.length;
		case "grid":
			return shape.columns * shape.rows * shape.layers;
		case "wave":
			return shape.columns * shape.rows;
		default:
			return shape.count;
	}
}
