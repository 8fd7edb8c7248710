/**
 * Change of sample rate by a windowed sinc in polyphase form (Crochiere and Rabiner, Multirate Digital Signal
 * Processing, 1983; Kaiser window with β = 7: 70 dB). No delay: output sample i stands at i / to seconds. The band is
 * flat up to 0.89 of the lower rate's half and gone from 1.11 of it on: half amplitude lies at the half itself.
 */

/** Zero crossings of the sinc on each side where nothing else is asked for. */
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

/** Input samples that are worked on at a time. */
const PIECE = 32_768;

/** Changes the rate of a signal that comes piece by piece: the same samples whatever the pieces. */
export interface Resampler {
	/** Takes the next samples. @returns the outputs that they complete */
	push(samples: Float32Array): Float32Array;
	/** @returns the outputs that reach past the end, beyond which the signal is zero. Nothing may be pushed afterwards. */
	finish(): Float32Array;
}

/**
 * @param from Hz, whole
 * @param to Hz, whole
 * @param crossings zero crossings of the sinc on each side, in samples of the lower of the two rates: with fewer the band
 * ends less sharply, and the work is less
 * @returns a resampler that gives ceil(length · to / from) samples in all; a copy where the rates are the same
 */
export function createResampler(from: number, to: number, crossings = CROSSINGS): Resampler {
	if (from === to) return { push: (samples) => samples.slice(), finish: () => new Float32Array(0) };
	const divisor = greatestDivisor(Math.round(from), Math.round(to));
	const step = from / to; // input samples an output sample
	const phases = Math.min(to / divisor, MOST_PHASES);
	const reach = Math.ceil(crossings * Math.max(1, step));
	const table = kernelTable(phases, reach, Math.min(1, 1 / step));
	const decimate = phases === 1 ? createDecimator(step, table) : null;
	// Input samples base … base + count lie in `held`; the signal begins after `reach` zeros.
	let held = new Float32Array(reach + PIECE + Math.ceil(2 * (reach + step)) + 4);
	let base = -reach;
	let count = reach;
	let done = 0; // outputs so far

	/** Outputs `done` … `last` into `out`; what no further output needs is let go. */
	const produce = (last: number, out: Float32Array, at: number): void => {
		if (decimate) decimate(held.subarray(0, count), done * step - reach + 1 - base, out, at, at + last - done);
		else interpolate(table, { phases, step, taps: 2 * reach }, held, base, done, last, out, at);
		done = last;
		const keep = Math.max(base, Math.min(base + count, Math.floor(done * step) - reach));
		held.copyWithin(0, keep - base, count);
		count -= keep - base;
		base = keep;
	};
	const take = (samples: Float32Array): void => {
		if (count + samples.length > held.length) {
			const wider = new Float32Array(count + samples.length);
			wider.set(held.subarray(0, count));
			held = wider;
		}
		held.set(samples, count);
		count += samples.length;
	};
	/** Outputs of which every input has come: an output reads up to `reach` samples past its own place. */
	const ready = (): number => Math.max(done, Math.floor((base + count - reach - 2) / step));

	return {
		push: (samples) => {
			const came = base + count + samples.length;
			const out = new Float32Array(Math.max(done, Math.floor((came - reach - 2) / step)) - done);
			const first = done;
			for (let at = 0; at < samples.length; at += PIECE) {
				take(samples.subarray(at, at + PIECE));
				produce(ready(), out, done - first);
			}
			return out;
		},
		finish: () => {
			const total = Math.ceil(((base + count) * to) / from);
			const out = new Float32Array(Math.max(0, total - done));
			take(new Float32Array(2 * reach + Math.ceil(step) + 4));
			produce(Math.max(done, total), out, 0);
			return out;
		},
	};
}

/** Outputs first … last at places between the input's samples, each by the row of weights for its phase. */
function interpolate(
	table: Float32Array,
	{ phases, step, taps }: { phases: number; step: number; taps: number },
	held: Float32Array,
	base: number,
	first: number,
	last: number,
	out: Float32Array,
	to: number,
): void {
	for (let i = first; i < last; i++) {
		const at = i * step;
		let whole = Math.floor(at + 1e-9);
		let phase = Math.round((at - whole) * phases);
		if (phase === phases) {
			phase = 0;
			whole++;
		}
		// Tap j weighs input sample whole − taps / 2 + 1 + j.
		const from = whole - taps / 2 + 1 - base;
		const row = phase * taps;
		let a = 0;
		let b = 0;
		for (let j = 0; j < taps; j += 2) {
			a += held[from + j] * table[row + j];
			b += held[from + j + 1] * table[row + j + 1];
		}
		out[to + i - first] = a + b;
	}
}

/**
 * The signal at another rate.
 * @param signal samples at `from` Hz
 * @param from Hz, whole
 * @param to Hz, whole
 * @returns ceil(length · to / from) samples; a copy where the rates are the same
 */
export function resample(signal: Float32Array, from: number, to: number): Float32Array {
	const resampler = createResampler(from, to);
	const out = new Float32Array(Math.ceil((signal.length * to) / from));
	let at = 0;
	for (let start = 0; start < signal.length; start += PIECE) {
		const part = resampler.push(signal.subarray(start, start + PIECE));
		out.set(part, at);
		at += part.length;
	}
	out.set(resampler.finish(), at);
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
