/**
 * Change of sample rate by a windowed sinc in polyphase form (Crochiere and Rabiner, Multirate Digital Signal
 * Processing, 1983; Kaiser window with β = 7: 70 dB). No delay: output sample i stands at i / to seconds. The band is
 * flat up to 0.89 of the lower rate's half and gone from 1.11 of it on: half amplitude lies at the half itself.
 */

/** Zero crossings of the sinc on each side, in samples of the lower of the two rates. */
const CROSSINGS = 20;
const KAISER_BETA = 7;
/** Phases kept in the table where the ratio of the rates has no small denominator. */
const MOST_PHASES = 2048;

/** Modified Bessel function of order 0 by its series. */
function bessel0(x: number): number {
	let sum = 1;
	let term = 1;
	for (let k = 1; term > sum * 1e-12; k++) {
		term *= (x / (2 * k)) ** 2;
		sum += term;
	}
	return sum;
}

const greatestDivisor = (a: number, b: number): number => (b === 0 ? a : greatestDivisor(b, a % b));

/**
 * The signal at another rate.
 * @param signal samples at `from` Hz
 * @param from Hz, whole
 * @param to Hz, whole
 * @returns ceil(length · to / from) samples; a copy where the rates are the same
 */
export function resample(signal: Float32Array, from: number, to: number): Float32Array {
	return resampleMix([signal], from, to);
}

/**
 * The mean of several channels at another rate, without a mixed copy at the old rate: half an hour of stereo takes the
 * room of its result alone.
 */
export function resampleMix(channels: readonly Float32Array[], from: number, to: number): Float32Array {
	const length = channels[0]?.length ?? 0;
	const out = new Float32Array(Math.ceil((length * to) / from));
	const mixed = createMixer(channels);
	if (from === to) {
		mixed(0, out);
		return out;
	}
	const divisor = greatestDivisor(Math.round(from), Math.round(to));
	const step = from / to; // input samples an output sample
	const exactPhases = to / divisor;
	const phases = Math.min(exactPhases, MOST_PHASES);
	const reach = Math.ceil(CROSSINGS * Math.max(1, step));
	const taps = 2 * reach;
	const table = kernelTable(phases, reach, Math.min(1, 1 / step));
	// The input is mixed block by block: each block's outputs need `reach` input samples on either side.
	const block = 16_384;
	const input = new Float32Array(Math.ceil(block * step) + taps + 4);
	for (let first = 0; first < out.length; first += block) {
		const last = Math.min(out.length, first + block);
		const base = Math.floor(first * step) - reach;
		mixed(base, input);
		if (phases === 1) {
			decimateBlock(input, -base, step, table, reach, out, first, last);
			continue;
		}
		for (let i = first; i < last; i++) {
			const at = i * step;
			let whole = Math.floor(at + 1e-9);
			let phase = Math.round((at - whole) * phases);
			if (phase === phases) {
				phase = 0;
				whole++;
			}
			// Tap j weighs input sample whole − reach + 1 + j.
			const from0 = whole - reach + 1 - base;
			const row = phase * taps;
			let a = 0;
			let b = 0;
			for (let j = 0; j < taps; j += 2) {
				a += input[from0 + j] * table[row + j];
				b += input[from0 + j + 1] * table[row + j + 1];
			}
			out[i] = a + b;
		}
	}
	return out;
}

/**
 * A whole number of input samples an output sample: one symmetric row of weights, of which those at whole multiples of
 * the step but the centre's are zero. Both save work where most of it is done (44.1 → 22.05 kHz).
 */
function decimateBlock(
	input: Float32Array,
	origin: number,
	step: number,
	table: Float32Array,
	reach: number,
	out: Float32Array,
	first: number,
	last: number,
): void {
	const centre = reach - 1;
	const offsets: number[] = [];
	for (let k = 1; k < reach; k++) if (k % step !== 0) offsets.push(k);
	const weights = Float32Array.from(offsets, (k) => table[centre + k]);
	const distances = Int32Array.from(offsets);
	for (let i = first; i < last; i++) {
		const at = origin + i * step;
		let sum = input[at] * table[centre];
		for (let k = 0; k < distances.length; k++) {
			sum += weights[k] * (input[at - distances[k]] + input[at + distances[k]]);
		}
		out[i] = sum;
	}
}

/** Row p: the weights for an output that lies p / phases of a sample past the tap reach − 1. Each row sums to 1. */
function kernelTable(phases: number, reach: number, cutoff: number): Float32Array {
	const taps = 2 * reach;
	const table = new Float32Array(phases * taps);
	const row = new Float64Array(taps);
	for (let p = 0; p < phases; p++) {
		let sum = 0;
		for (let j = 0; j < taps; j++) {
			const x = j - (reach - 1) - p / phases;
			const inWindow = x / reach;
			const window = Math.abs(inWindow) < 1 ? bessel0(KAISER_BETA * Math.sqrt(1 - inWindow * inWindow)) : 0;
			const angle = Math.PI * x * cutoff;
			row[j] = window * (x === 0 ? 1 : Math.sin(angle) / angle);
			sum += row[j];
		}
		for (let j = 0; j < taps; j++) table[p * taps + j] = row[j] / sum;
	}
	return table;
}

/** Fills a buffer with the channels' mean from input sample `base` on; zero outside the signal's ends. */
function createMixer(channels: readonly Float32Array[]): (base: number, into: Float32Array) => void {
	const share = 1 / Math.max(1, channels.length);
	return (base, into) => {
		into.fill(0);
		for (const channel of channels) {
			const from = Math.max(0, -base);
			const to = Math.min(into.length, channel.length - base);
			for (let i = from; i < to; i++) into[i] += channel[base + i] * share;
		}
	};
}
