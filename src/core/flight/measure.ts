/**
 * The measure of distance in flight: z is divided by the downwash factor, so that the exclusion ellipsoid about a drone
 * becomes a sphere of radius `spacing`. Coordinates are whole millimetres in that measure, so squared distances are
 * exact in float64 (as long as sums over the fleet stay below 2⁵³ mm²: 10 000 drones that each fly 900 m).
 */

/** 3·N whole millimetres in the measure of spacing, from 3·N metres. */
export function scaledMillimetres(positions: ArrayLike<number>, downwash: number): Float64Array {
	const scaled = new Float64Array(positions.length);
	for (let i = 0; i < positions.length; i += 3) {
		scaled[i] = Math.round(positions[i] * 1000);
		scaled[i + 1] = Math.round(positions[i + 1] * 1000);
		scaled[i + 2] = Math.round((positions[i + 2] * 1000) / downwash);
	}
	return scaled;
}
