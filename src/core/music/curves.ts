/** Curves of the music for intensity to follow, each 0..1 over the whole track, and the waveform for drawing. */
import { createGrowing } from "../maths/index.ts";
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

/** Draws the waveform of sound that comes piece by piece. */
export interface PeakDrawer {
	push(channels: readonly Float32Array[]): void;
	/** Lowest and highest sample of each 1/rate s over all channels, interleaved. Nothing may be pushed afterwards. */
	finish(): { values: Float32Array; rate: number };
}

export function createPeakDrawer(sampleRate: number): PeakDrawer {
	const peaks = createGrowing();
	const edgeOf = (pair: number): number => Math.round((pair * sampleRate) / PEAK_RATE);
	let done = 0; // samples
	let pairs = 0; // whole ones
	let low = 0;
	let high = 0;
	const close = (): void => {
		peaks.push(low);
		peaks.push(high);
		low = 0;
		high = 0;
	};
	return {
		push: (channels) => {
			const length = channels[0]?.length ?? 0;
			for (let at = 0; at < length; ) {
				const edge = edgeOf(pairs + 1);
				const to = Math.min(length, at + edge - done);
				for (const channel of channels) {
					// locals: what a closure holds is read and written through memory
					let least = low;
					let most = high;
					for (let i = at; i < to; i++) {
						const x = channel[i];
						if (x < least) least = x;
						if (x > most) most = x;
					}
					low = least;
					high = most;
				}
				done += to - at;
				at = to;
				if (done < edge) break;
				close();
				pairs++;
			}
		},
		finish: () => {
			if (done > edgeOf(pairs)) close();
			return { values: peaks.values(), rate: PEAK_RATE };
		},
	};
}
