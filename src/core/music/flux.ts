/**
 * Multi-band spectral flux: how much each band's level rises, against the highest of its
 * neighbourhood a moment before, so that vibrato is no onset (Böck and Widmer, SuperFlux, 2013).
 */
import { BAND_COUNT, type Bands } from "./bands.ts";

/** Frames back that a rise is measured against. */
const LAG = 2;

/** Mean rise of `from` … `to` bands, frame by frame. */
export function spectralFlux(bands: Bands, from = 0, to = BAND_COUNT): Float32Array {
	const flux = new Float32Array(bands.frames);
	const { values } = bands;
	for (let i = LAG; i < bands.frames; i++) {
		const now = i * BAND_COUNT;
		const before = (i - LAG) * BAND_COUNT;
		let sum = 0;
		for (let b = from; b < to; b++) {
			let high = values[before + b];
			if (b > 0 && values[before + b - 1] > high) high = values[before + b - 1];
			if (b + 1 < BAND_COUNT && values[before + b + 1] > high) high = values[before + b + 1];
			const rise = values[now + b] - high;
			if (rise > 0) sum += rise;
		}
		flux[i] = sum / (to - from);
	}
	return flux;
}
