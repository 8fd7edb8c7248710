import type { Samples } from "./samples.ts";

/** Share of the channels' mean energy below which their mean counts as cancelled. */
const CANCELLED = 0.02;

/**
 * The mean of all channels. Where it would cancel (two channels in opposite phase), the loudest channel instead: music
 * that can be heard must not vanish from the analysis.
 */
export function mixToMono(samples: Samples): Float32Array {
	const { channels } = samples;
	const length = channels[0]?.length ?? 0;
	const mono = new Float32Array(length);
	if (channels.length === 1) {
		mono.set(channels[0]);
		return mono;
	}
	const share = 1 / channels.length;
	for (const channel of channels) for (let i = 0; i < length; i++) mono[i] += channel[i] * share;
	const energies = channels.map(energyOf);
	const loudest = energies.indexOf(Math.max(...energies));
	// Uncorrelated channels of equal energy leave 1/n of it in their mean; cancellation leaves next to nothing.
	if (energyOf(mono) < CANCELLED * energies[loudest] * share) mono.set(channels[loudest]);
	return mono;
}

function energyOf(signal: Float32Array): number {
	let sum = 0;
	for (let i = 0; i < signal.length; i++) sum += signal[i] * signal[i];
	return sum;
}
