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
	const decimate = createDecimator(phases === 1 ? step : 1, table);
	// The input is mixed block by block: each block's outputs need `reach` input samples on either side.
	const block = 16_384;
	const input = new Float32Array(Math.ceil(block * step) + taps + 4);
	for (let first = 0; first < out.length; first += block) {
		const last = Math.min(out.length, first + block);
		const base = Math.floor(first * step) - reach;
		mixed(base, input);
		if (phases === 1) {
			decimate(input, first * step - reach + 1 - base, out, first, last);
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
 * A whole number of input samples an output sample: the input is dealt out into `step` signals of every step-th sample,
 * each filtered by its own share of the weights, which then lie side by side. Half of them are zero where the step is 2
 * (all even places of a half-band sinc but the centre) and are left out.
 */
function createDecimator(
	step: number,
	weights: Float32Array,
): (input: Float32Array, from: number, out: Float32Array, first: number, last: number) => void {
	const shares = Array.from({ length: step }, (_, p) => {
		const dealt = Array.from({ length: Math.ceil((weights.length - p) / step) }, (_, k) => weights[p + k * step]);
		const lead = dealt.findIndex((w) => Math.abs(w) > 1e-9);
		let end = dealt.length;
		while (end > lead && Math.abs(dealt[end - 1]) <= 1e-9) end--;
		const kept = lead < 0 ? [] : dealt.slice(lead, end);
		while (kept.length % 4 !== 0) kept.push(0);
		return { place: p + Math.max(0, lead) * step, weights: Float64Array.from(kept) };
	}).filter((share) => share.weights.length > 0);
	let dealt = new Float64Array(0);
	let sums = new Float64Array(0);
	return (input, from, out, first, last) => {
		const count = Math.ceil((last - first) / 4) * 4;
		if (sums.length < count) sums = new Float64Array(count);
		sums.fill(0);
		for (const share of shares) {
			const need = count + share.weights.length + 4;
			if (dealt.length < need) dealt = new Float64Array(need);
			for (let k = 0, at = from + share.place; k < need; k++, at += step) dealt[k] = at < input.length ? input[at] : 0;
			filterInto(sums, count, dealt, share.weights);
		}
		for (let i = first; i < last; i++) out[i] = sums[i - first];
	};
}

/** sums[i] += Σ weights[k] · x[i + k], four sums and four weights at a time so that each value is read once for four. */
function filterInto(sums: Float64Array, count: number, x: Float64Array, weights: Float64Array): void {
	for (let i = 0; i < count; i += 4) {
		let [a, b, c, d] = [0, 0, 0, 0];
		let x0 = x[i];
		let x1 = x[i + 1];
		let x2 = x[i + 2];
		for (let k = 0; k < weights.length; k += 4) {
			const x3 = x[i + k + 3];
			const x4 = x[i + k + 4];
			const x5 = x[i + k + 5];
			const x6 = x[i + k + 6];
			const w0 = weights[k];
			const w1 = weights[k + 1];
			const w2 = weights[k + 2];
			const w3 = weights[k + 3];
			a += w0 * x0 + w1 * x1 + w2 * x2 + w3 * x3;
			b += w0 * x1 + w1 * x2 + w2 * x3 + w3 * x4;
			c += w0 * x2 + w1 * x3 + w2 * x4 + w3 * x5;
			d += w0 * x3 + w1 * x4 + w2 * x5 + w3 * x6;
			x0 = x4;
			x1 = x5;
			x2 = x6;
		}
		sums[i] += a;
		sums[i + 1] += b;
		sums[i + 2] += c;
		sums[i + 3] += d;
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
