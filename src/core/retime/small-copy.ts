/**
 * A mono copy of a soundtrack at a low rate, made cheaply: the rate is halved by half-band filters as long as it goes,
 * and only what is left is resampled. Music above the copy's band is not needed to tell moments apart.
 */
import type { Samples } from "../decode/index.ts";
import { resample } from "../maths/index.ts";

/** Pairs of weights beside the centre of the half-band filter: −60 dB from 0.65 of the new rate on. */
const PAIRS = 8;
/** Share of the channels' mean energy below which their mean counts as cancelled. */
const CANCELLED = 0.02;

/** @returns mono at `rate`; sample i stands at i / rate seconds */
export function makeSmallCopy(samples: Samples, rate: number): Float32Array {
	let channels = audible(samples.channels);
	let current = samples.sampleRate;
	// Half a rate must stay above the goal, or music that the copy should hold would be lost.
	while (current / 2 >= rate) {
		channels = [halve(channels)];
		current /= 2;
	}
	if (current !== rate) return resample(channels.length === 1 ? channels[0] : mix(channels), current, rate);
	return channels.length === 1 ? channels[0] : mix(channels);
}

/** The channels to mix: all of them, or the loudest alone where the others would cancel it (opposite phase). */
export function audible(channels: readonly Float32Array[]): readonly Float32Array[] {
	if (channels.length < 2) return channels;
	const share = 1 / channels.length;
	const energies = channels.map(() => 0);
	let mixed = 0;
	// Every 16th sample tells enough about energy.
	for (let i = 0; i < channels[0].length; i += 16) {
		let sum = 0;
		for (let c = 0; c < channels.length; c++) {
			const value = channels[c][i];
			sum += value;
			energies[c] += value * value;
		}
		mixed += (sum * share) ** 2;
	}
	const loudest = energies.indexOf(Math.max(...energies));
	return mixed < CANCELLED * energies[loudest] * share ? [channels[loudest]] : channels;
}

function mix(channels: readonly Float32Array[]): Float32Array {
	const out = new Float32Array(channels[0]?.length ?? 0);
	for (const channel of channels) for (let i = 0; i < out.length; i++) out[i] += channel[i] / channels.length;
	return out;
}

/** The channels' mean at half the rate, through a Blackman-windowed half-band filter; no delay. */
function halve(channels: readonly Float32Array[]): Float32Array {
	const length = channels[0].length;
	const out = new Float32Array(Math.ceil(length / 2));
	const weights = new Float64Array(PAIRS);
	let total = 0.5;
	for (let p = 0; p < PAIRS; p++) {
		const k = 2 * p + 1;
		const x = Math.PI * (k / (2 * PAIRS));
		weights[p] = (Math.sin((Math.PI * k) / 2) / (Math.PI * k)) * (0.42 + 0.5 * Math.cos(x) + 0.08 * Math.cos(2 * x));
		total += 2 * weights[p];
	}
	for (let p = 0; p < PAIRS; p++) weights[p] /= total;
	const centre = 0.5 / total;
	const [w0, w1, w2, w3, w4, w5, w6, w7] = weights;
	const block = 8192;
	const share = 1 / channels.length;
	// One block of the mean at a time, even and odd samples apart, so that reads run straight through memory: odd[i] is
	// sample 2 · (i − PAIRS) + 1 of the block. Half an hour of stereo needs no mixed copy.
	const even = new Float64Array(block);
	const odd = new Float64Array(block + 2 * PAIRS);
	for (let first = 0; first < out.length; first += block) {
		const count = Math.min(block, out.length - first);
		even.fill(0);
		odd.fill(0);
		for (const channel of channels) {
			for (let i = 0; i < count; i++) even[i] += channel[2 * (first + i)] * share;
			const base = 2 * (first - PAIRS) + 1;
			const from = Math.max(0, Math.ceil(-base / 2));
			const to = Math.min(odd.length, Math.ceil((length - base) / 2));
			for (let i = from; i < to; i++) odd[i] += channel[base + 2 * i] * share;
		}
		for (let i = 0; i < count; i++) {
			out[first + i] =
				centre * even[i] +
				w0 * (odd[i + 7] + odd[i + 8]) +
				w1 * (odd[i + 6] + odd[i + 9]) +
				w2 * (odd[i + 5] + odd[i + 10]) +
				w3 * (odd[i + 4] + odd[i + 11]) +
				w4 * (odd[i + 3] + odd[i + 12]) +
				w5 * (odd[i + 2] + odd[i + 13]) +
				w6 * (odd[i + 1] + odd[i + 14]) +
				w7 * (odd[i] + odd[i + 15]);
		}
	}
	return out;
}
