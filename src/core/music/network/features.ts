/**
 * What the beat network hears, as it heard it in training: `src/training/features.py` computes the same figures, and a
 * test holds the two together. The bands and the chroma are those that the rest of the analysis reads.
 */
import { BAND_COUNT, type Bands } from "../bands.ts";
import { CHROMA_SIZE, type Harmony } from "../harmony.ts";
import { CHROMA_ROWS, MEL_ROWS, ROWS } from "./weights.ts";

/** What a band's distance from its mean is divided by. */
const MEL_SPREAD = 0.4;

/**
 * The network's input: each row without its mean over the track; mel rows divided by MEL_SPREAD, each register of the
 * chroma by its own spread.
 * @param bands, harmony of a signal at HEARD_LEVEL; a chroma frame stands for two frames of bands
 * @returns frame i's ROWS values at i · ROWS: 48 mel bands, 12 of the middle register, 12 of the bass
 */
export function prepare(bands: Bands, harmony: Harmony): Float32Array {
	const { frames } = bands;
	const out = new Float32Array(frames * ROWS);
	const means = new Float64Array(ROWS);
	for (let i = 0; i < frames; i++) {
		const at = i * ROWS;
		for (let b = 0; b < MEL_ROWS; b++) out[at + b] = bands.values[i * BAND_COUNT + b];
		const chroma = Math.min(harmony.frames - 1, i >> 1) * CHROMA_SIZE;
		for (let r = 0; r < CHROMA_ROWS; r++) out[at + MEL_ROWS + r] = harmony.values[chroma + r];
		for (let r = 0; r < ROWS; r++) means[r] += out[at + r];
	}
	for (let r = 0; r < ROWS; r++) means[r] /= Math.max(1, frames);
	const squares = [0, 0];
	for (let i = 0; i < frames; i++) {
		const at = i * ROWS;
		for (let r = 0; r < ROWS; r++) {
			const value = out[at + r] - means[r];
			out[at + r] = r < MEL_ROWS ? value / MEL_SPREAD : value;
			if (r >= MEL_ROWS) squares[r < MEL_ROWS + 12 ? 0 : 1] += value * value;
		}
	}
	const spreads = squares.map((sum) => Math.max(1e-3, Math.sqrt(sum / Math.max(1, frames * 12))));
	for (let i = 0; i < frames; i++) {
		for (let r = MEL_ROWS; r < ROWS; r++) out[i * ROWS + r] /= spreads[r < MEL_ROWS + 12 ? 0 : 1];
	}
	return out;
}
