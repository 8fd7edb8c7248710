/** Curves of the music for intensity to follow, each 0..1 over the whole track, and the waveform for drawing. */
import type { Curve } from "../show/index.ts";
import { BAND_COUNT, type Bands, FRAME_RATE } from "./bands.ts";
import { spectralFlux } from "./flux.ts";
import type { Loudness } from "./loudness.ts";

/** Hz that part low from middle and middle from high. */
const LOW_TOP = 200;
const HIGH_BOTTOM = 2500;
/** LU below the track's loudest that a curve shows as 0. */
const LOUDNESS_RANGE = 30;
/** Share of the values that a curve's 1 lies above: one crash cymbal must not press the rest down. */
const TOP_SHARE = 0.995;
/** Lowest and highest sample pairs a second. */
const PEAK_RATE = 200;

function quantile(values: Float32Array, share: number): number {
	if (values.length === 0) return 0;
	const sorted = values.slice().sort();
	return sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))];
}

/** Mean level of the bands between two frequencies, smoothed over a tenth of a second. */
function bandLevel(bands: Bands, from: number, to: number): Float32Array {
	const chosen = [...bands.centres.keys()].filter((b) => bands.centres[b] >= from && bands.centres[b] < to);
	const raw = new Float32Array(bands.frames);
	for (let i = 0; i < bands.frames; i++) {
		let sum = 0;
		for (const b of chosen) sum += bands.values[i * BAND_COUNT + b];
		raw[i] = sum / Math.max(1, chosen.length);
	}
	const weights = [1, 2, 3, 2, 1];
	return raw.map((_, i) => {
		let sum = 0;
		for (let j = -2; j <= 2; j++) sum += weights[j + 2] * raw[Math.max(0, Math.min(raw.length - 1, i + j))];
		return sum / 9;
	});
}

/** A curve stretched so that its top is 1; below `least` of the top's unit it stays at nothing. */
function stretch(values: Float32Array, least: number): Float32Array {
	const top = quantile(values, TOP_SHARE);
	if (top < least) return new Float32Array(values.length);
	return values.map((x) => Math.max(0, Math.min(1, x / top)));
}

/** Loudness, low, middle, high, onset. */
export function drawCurves(bands: Bands, loudness: Loudness): Curve[] {
	const loudest = loudness.momentary.reduce((most, x) => Math.max(most, x), -70);
	const loud = loudness.momentary.map((x) =>
		loudest <= -70 ? 0 : Math.max(0, Math.min(1, 1 + (x - loudest) / LOUDNESS_RANGE)),
	);
	// A momentary window ends at (i + 1) / rate and looks back 0.4 s: its middle is 0.1 s before its index.
	const centred = loud.map((_, i) => loud[Math.min(loud.length - 1, i + 1)]);
	const level = (from: number, to: number): Float32Array => stretch(bandLevel(bands, from, to), 0.02);
	return [
		{ name: "loudness", rate: loudness.rate, values: centred },
		{ name: "low", rate: FRAME_RATE, values: level(0, LOW_TOP) },
		{ name: "middle", rate: FRAME_RATE, values: level(LOW_TOP, HIGH_BOTTOM) },
		{ name: "high", rate: FRAME_RATE, values: level(HIGH_BOTTOM, Number.POSITIVE_INFINITY) },
		{ name: "onset", rate: FRAME_RATE, values: stretch(spectralFlux(bands), 0.02) },
	];
}

/** Lowest and highest sample of each 1/200 s over all channels, interleaved. */
export function drawPeaks(
	channels: readonly Float32Array[],
	sampleRate: number,
): { values: Float32Array; rate: number } {
	const length = channels[0]?.length ?? 0;
	const count = Math.ceil((length / sampleRate) * PEAK_RATE);
	const values = new Float32Array(2 * count);
	for (const channel of channels) {
		for (let i = 0; i < count; i++) {
			const to = Math.min(length, Math.round(((i + 1) * sampleRate) / PEAK_RATE));
			let low = values[2 * i];
			let high = values[2 * i + 1];
			for (let k = Math.round((i * sampleRate) / PEAK_RATE); k < to; k++) {
				const x = channel[k];
				if (x < low) low = x;
				if (x > high) high = x;
			}
			values[2 * i] = low;
			values[2 * i + 1] = high;
		}
	}
	return { values, rate: PEAK_RATE };
}
