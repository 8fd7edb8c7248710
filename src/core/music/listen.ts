/**
 * The first pass over the sound: all that the rest of the analysis needs of it, gathered piece by piece, so that half an
 * hour of music need never lie in memory as samples.
 */
import { createResampler } from "../maths/index.ts";
import type { Analysis } from "./analysis.ts";
import { type Bands, createBandEar, HEARING_RATE } from "./bands.ts";
import { createPeakDrawer } from "./curves.ts";
import { createHarmonyEar, type Harmony } from "./harmony.ts";
import { createLoudnessMeter, type Loudness } from "./loudness.ts";

/** Root mean square that a track is brought to before it is heard: loudness carries no information about beats. */
export const HEARD_LEVEL = 0.1;
/** Zero crossings of the resampling filter, near training's: flat within 1 dB to 10 kHz, and what folds below 9 kHz is 60 dB down. */
const CROSSINGS = 12;
/** Share of the loudest channel's energy below which the channels' mean counts as cancelled. */
const CANCELLED = 0.02;

/** What was heard of a whole track. */
export interface Heard {
	/** Hz. */
	readonly sampleRate: number;
	readonly channels: number;
	/** Samples of a channel. */
	readonly length: number;
	readonly loudness: Loudness;
	readonly peaks: Analysis["peaks"];
	/** Of the track at HEARD_LEVEL. */
	readonly bands: Bands;
	readonly harmony: Harmony;
	/** The loudest channel where the channels cancel in their mean, which must then be listened to alone; else null. */
	readonly alone: number | null;
}

export interface Listener {
	/** Takes the next samples of every channel, −1..1. */
	push(channels: readonly Float32Array[]): void;
	/** Nothing may be pushed afterwards. */
	finish(): Heard;
}

const energyOf = (signal: Float32Array): number => {
	let sum = 0;
	for (let i = 0; i < signal.length; i++) sum += signal[i] * signal[i];
	return sum;
};

/** @param alone the channel that beats and harmony are heard in; null: the mean of all */
export function createListener(sampleRate: number, channelCount: number, alone: number | null = null): Listener {
	const meter = createLoudnessMeter(sampleRate, channelCount);
	const drawer = createPeakDrawer(sampleRate);
	const resampler = createResampler(sampleRate, HEARING_RATE, CROSSINGS);
	const bandEar = createBandEar();
	const harmonyEar = createHarmonyEar();
	const energies = new Float64Array(channelCount);
	let mixed = new Float32Array(0);
	let length = 0;
	/** Of the mean, as it is and as it is heard. */
	let energy = 0;
	let heardEnergy = 0;
	let heardLength = 0;

	const hear = (mono: Float32Array): void => {
		heardEnergy += energyOf(mono);
		heardLength += mono.length;
		bandEar.push(mono);
		harmonyEar.push(mono);
	};
	const mix = (channels: readonly Float32Array[]): Float32Array => {
		if (channels.length === 1) return channels[0];
		if (alone !== null) return channels[alone];
		const count = channels[0].length;
		if (mixed.length < count) mixed = new Float32Array(count);
		const mean = mixed.subarray(0, count).fill(0);
		const share = 1 / channels.length;
		for (const channel of channels) for (let i = 0; i < count; i++) mean[i] += channel[i] * share;
		return mean;
	};

	return {
		push: (channels) => {
			length += channels[0].length;
			meter.push(channels);
			drawer.push(channels);
			const mono = mix(channels);
			if (channelCount > 1) {
				energy += energyOf(mono);
				for (let c = 0; c < channelCount; c++) energies[c] += energyOf(channels[c]);
			}
			hear(resampler.push(mono));
		},
		finish: () => {
			hear(resampler.finish());
			const level = Math.sqrt(heardEnergy / Math.max(1, heardLength));
			// Silence stays silence.
			const gain = level > 1e-7 ? HEARD_LEVEL / level : 1;
			const loudest = energies.indexOf(Math.max(...energies));
			const cancels = channelCount > 1 && alone === null && energy < (CANCELLED * energies[loudest]) / channelCount;
			return {
				sampleRate,
				channels: channelCount,
				length,
				loudness: meter.finish(),
				peaks: drawer.finish(),
				bands: bandEar.finish(gain),
				harmony: harmonyEar.finish(gain),
				alone: cancels ? loudest : null,
			};
		},
	};
}
