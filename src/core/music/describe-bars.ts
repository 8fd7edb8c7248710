/**
 * What each bar sounds like: its timbre and harmony in eight steps, and how alike any two bars are.
 */
import { BAND_COUNT, type Bands, FRAME_RATE } from "./bands.ts";
import { CHROMA_RATE, CHROMA_SIZE, type Harmony } from "./harmony.ts";

const STEPS = 8;
/** Cosine coefficients of the mel bands that tell timbre. */
const COSINES = 20;
const CHROMA_SHARE = 0.35;
/** Spread of the Gaussian that turns distance into likeness, as a share of the track's mean squared distance. */
const SPREAD = 0.5;
const WIDTH = STEPS * (COSINES + CHROMA_SIZE);

/** Likeness of bars: value [a · count + b] in 0..1, symmetric, 1 on the diagonal. */
export interface BarLikeness {
	readonly count: number;
	readonly values: Float32Array;
}

/** Rows of step features: bars · STEPS rows of `size`, each the mean of the frames in that eighth of its bar. */
function stepMeans(values: Float32Array, size: number, rate: number, edges: Float64Array): Float32Array {
	const frames = values.length / size;
	const bars = Math.max(0, edges.length - 1);
	const means = new Float32Array(bars * STEPS * size);
	for (let bar = 0; bar < bars; bar++) {
		const span = edges[bar + 1] - edges[bar];
		for (let step = 0; step < STEPS; step++) {
			const from = Math.min(frames - 1, Math.max(0, Math.round((edges[bar] + (span * step) / STEPS) * rate)));
			const wanted = Math.round((edges[bar] + (span * (step + 1)) / STEPS) * rate);
			const to = Math.min(frames, Math.max(from + 1, wanted));
			const row = (bar * STEPS + step) * size;
			for (let i = from; i < to; i++) {
				for (let k = 0; k < size; k++) means[row + k] += values[i * size + k] / (to - from);
			}
		}
	}
	return means;
}

/** Takes each column's mean off and scales the columns to unit variance, each by itself or all alike. */
function centre(rows: Float32Array, size: number, each: boolean): void {
	const count = rows.length / size;
	const squares = new Float64Array(size);
	for (let k = 0; k < size; k++) {
		let mean = 0;
		for (let i = 0; i < count; i++) mean += rows[i * size + k] / count;
		for (let i = 0; i < count; i++) {
			rows[i * size + k] -= mean;
			squares[k] += rows[i * size + k] ** 2 / count;
		}
	}
	const all = squares.reduce((sum, x) => sum + x, 0) / size;
	for (let k = 0; k < size; k++) {
		const scale = 1 / Math.sqrt(Math.max(1e-9, each ? squares[k] : all));
		for (let i = 0; i < count; i++) rows[i * size + k] *= scale;
	}
}

/**
 * Likeness of all pairs of bars: a Gaussian of the distance between their descriptions, as wide as the track's own
 * differences ask for.
 * @param edges seconds, the start of each bar and the end of the last
 */
export function compareBars(bands: Bands, harmony: Harmony, edges: Float64Array): BarLikeness {
	const count = Math.max(0, edges.length - 1);
	const mel = stepMeans(bands.values, BAND_COUNT, FRAME_RATE, edges);
	const cosines = new Float32Array(count * STEPS * COSINES);
	const table = Float32Array.from({ length: COSINES * BAND_COUNT }, (_, k) =>
		Math.cos((Math.PI * Math.floor(k / BAND_COUNT) * ((k % BAND_COUNT) + 0.5)) / BAND_COUNT),
	);
	for (let row = 0; row < count * STEPS; row++) {
		for (let c = 0; c < COSINES; c++) {
			let sum = 0;
			for (let b = 0; b < BAND_COUNT; b++) sum += table[c * BAND_COUNT + b] * mel[row * BAND_COUNT + b];
			cosines[row * COSINES + c] = sum;
		}
	}
	const chroma = stepMeans(harmony.values, CHROMA_SIZE, CHROMA_RATE, edges);
	// A fine difference of timbre counts as much as loud against soft; the pitch classes keep their proportions.
	centre(cosines, COSINES, true);
	centre(chroma, CHROMA_SIZE, false);
	const rows = new Float32Array(count * WIDTH);
	for (let step = 0; step < count * STEPS; step++) {
		const at = step * (COSINES + CHROMA_SIZE);
		for (let k = 0; k < COSINES; k++) rows[at + k] = cosines[step * COSINES + k];
		for (let k = 0; k < CHROMA_SIZE; k++) rows[at + COSINES + k] = CHROMA_SHARE * chroma[step * CHROMA_SIZE + k];
	}
	const values = new Float32Array(count * count);
	let total = 0;
	for (let a = 0; a < count; a++) {
		for (let b = 0; b < a; b++) {
			let sum = 0;
			for (let k = 0; k < WIDTH; k++) {
				const d = rows[a * WIDTH + k] - rows[b * WIDTH + k];
				sum += d * d;
			}
			values[a * count + b] = sum;
			total += sum;
		}
	}
	const mean = total / Math.max(1, (count * (count - 1)) / 2);
	for (let a = 0; a < count; a++) {
		values[a * count + a] = 1;
		for (let b = 0; b < a; b++) {
			const like = Math.exp(-values[a * count + b] / Math.max(1e-9, SPREAD * mean));
			values[a * count + b] = like;
			values[b * count + a] = like;
		}
	}
	return { count, values };
}
