import type { Place } from "../show/index.ts";

/** Millimetres in a metre: positions are kept to whole millimetres, so that squared distances are exact in float64. */
const MILLIMETRES = 1000;

/** A coordinate in metres to the nearest whole millimetre. */
export function toMillimetre(metres: number): number {
	// + 0 turns −0 into 0, which would otherwise be written "-0" into files.
	return Math.round(metres * MILLIMETRES) / MILLIMETRES + 0;
}

/**
 * Puts a shape into the venue: scale, then tilt about x, then turn about z (both right-handed), then move; rounded to
 * whole millimetres.
 * @param local 3·M metres in the shape's own frame
 * @returns 3·M metres in the show frame
 */
export function placeSlots(local: Float64Array, place: Place): Float64Array {
	const tilt = (place.tilt * Math.PI) / 180;
	const turn = (place.turn * Math.PI) / 180;
	const [ct, st, cz, sz] = [exact(Math.cos(tilt)), exact(Math.sin(tilt)), exact(Math.cos(turn)), exact(Math.sin(turn))];
	const out = new Float64Array(local.length);
	for (let i = 0; i < local.length; i += 3) {
		const x = local[i] * place.scale;
		const y = local[i + 1] * place.scale;
		const z = local[i + 2] * place.scale;
		const away = y * ct - z * st;
		const up = y * st + z * ct;
		out[i] = toMillimetre(x * cz - away * sz + place.position[0]);
		out[i + 1] = toMillimetre(x * sz + away * cz + place.position[1]);
		out[i + 2] = toMillimetre(up + place.position[2]);
	}
	return out;
}

/** Cosine of 90° is 0, not 6e-17: quarter turns keep a grid on whole millimetres. */
function exact(value: number): number {
	const near = Math.round(value * 2) / 2;
	return Math.abs(value - near) < 1e-15 ? near : value;
}
