/**
 * The measure of distance that spacing is told in: horizontal metres count in full, vertical metres are divided by the
 * downwash factor, since a drone disturbs the air below it further than beside it. Formations are spread evenly in
 * this measure, so an upright picture has its rows `downwash` times as far apart as its columns.
 */
export interface Measure {
	readonly downwash: number;
	/** Cosine and sine of the formation's tilt about x: a tilted picture meets the vertical at another angle. */
	readonly cosTilt: number;
	readonly sinTilt: number;
}

/** Downwash where nobody said otherwise: the show file's own default. */
export const DEFAULT_DOWNWASH = 2;

/**
 * @param downwash from 1; vertical metres are divided by it
 * @param tilt degrees about x, as in a formation's place; a turn about z changes no distance and isn't needed
 */
export function createMeasure(downwash: number, tilt: number): Measure {
	const radians = (tilt * Math.PI) / 180;
	return { downwash, cosTilt: Math.cos(radians), sinTilt: Math.sin(radians) };
}

/** Length of the vector (dx, dy, dz) of a shape's own frame once it is tilted, in the measure of spacing. */
export function measuredLength(measure: Measure, dx: number, dy: number, dz: number): number {
	const away = dy * measure.cosTilt - dz * measure.sinTilt;
	const up = (dy * measure.sinTilt + dz * measure.cosTilt) / measure.downwash;
	return Math.sqrt(dx * dx + away * away + up * up);
}

/** What one metre along a shape's own upright axis z counts in the measure: 1/downwash upright, 1 laid flat. */
export function uprightShare(measure: Measure): number {
	return measuredLength(measure, 0, 0, 1);
}
