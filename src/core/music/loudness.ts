/**
 * Loudness after ITU-R BS.1770-4 (2015): K-weighting, mean square of 400 ms (momentary) and 3 s (short-term) windows
 * every 100 ms, gates at −70 LUFS and 10 LU below the mean for the integrated value.
 *
 * The recommendation gives its two filters for 48 kHz only. Their analogue prototypes (a high shelf of +4 dB at
 * 1682 Hz and a high-pass at 38 Hz), bilinearly transformed again, give the same response at any rate; the constants
 * are those of B. De Man, "Evaluation of implementations of the EBU R128 loudness measurement" (AES 145, 2018).
 */

/** LUFS that silence is given in place of minus infinity. */
export const SILENCE = -120;
const BLOCKS_A_SECOND = 10;
const MOMENTARY_BLOCKS = 4;
const SHORT_TERM_BLOCKS = 30;
const ABSOLUTE_GATE = -70;
const RELATIVE_GATE = -10;

/** Loudness in LUFS. Value i is the window that ends at (i + 1) / rate seconds. */
export interface Loudness {
	readonly integrated: number;
	readonly momentary: Float32Array;
	readonly shortTerm: Float32Array;
	readonly rate: number;
}

/** y = b0 x + b1 x′ + b2 x″ − a1 y′ − a2 y″ */
interface Biquad {
	readonly b0: number;
	readonly b1: number;
	readonly b2: number;
	readonly a1: number;
	readonly a2: number;
}

/** The recommendation's first stage: the head as a high shelf. */
function shelf(sampleRate: number): Biquad {
	const k = Math.tan((Math.PI * 1681.974450955533) / sampleRate);
	const q = 0.7071752369554196;
	const high = 10 ** (3.999843853973347 / 20);
	const band = high ** 0.4996667741545416;
	const a0 = 1 + k / q + k * k;
	return {
		b0: (high + (band * k) / q + k * k) / a0,
		b1: (2 * (k * k - high)) / a0,
		b2: (high - (band * k) / q + k * k) / a0,
		a1: (2 * (k * k - 1)) / a0,
		a2: (1 - k / q + k * k) / a0,
	};
}

/** Its second stage: a high-pass whose numerator the recommendation leaves at 1, −2, 1. */
function highPass(sampleRate: number): Biquad {
	const k = Math.tan((Math.PI * 38.13547087602444) / sampleRate);
	const q = 0.5003270373238773;
	const a0 = 1 + k / q + k * k;
	return { b0: 1, b1: -2, b2: 1, a1: (2 * (k * k - 1)) / a0, a2: (1 - k / q + k * k) / a0 };
}

/**
 * Weights of the channels: 1, but 1.41 for surrounds and 0 for the low-frequency channel, in the order of WAV files
 * (left, right, centre, low, surrounds). More than six channels have no place in BS.1770-4's table and count 1 each.
 */
function channelWeights(count: number): readonly number[] {
	if (count === 4) return [1, 1, 1.41, 1.41];
	if (count === 5) return [1, 1, 1, 1.41, 1.41];
	if (count === 6) return [1, 1, 1, 0, 1.41, 1.41];
	return new Array<number>(count).fill(1);
}

const toLufs = (power: number): number => (power > 1e-12 ? -0.691 + 10 * Math.log10(power) : SILENCE);
const toPower = (lufs: number): number => 10 ** ((lufs + 0.691) / 10);

/** What a channel's two filters hold: transposed direct form II, two states a stage. */
interface FilterState {
	u1: number;
	u2: number;
	v1: number;
	v2: number;
	/** Sum of squares of the block that is under way. */
	sum: number;
}

/** Measures loudness of sound that comes piece by piece. */
export interface LoudnessMeter {
	/** Takes the next samples of every channel. */
	push(channels: readonly Float32Array[]): void;
	/** Nothing may be pushed afterwards. */
	finish(): Loudness;
}

/** @param channelCount in the order of WAV files */
export function createLoudnessMeter(sampleRate: number, channelCount: number): LoudnessMeter {
	const weights = channelWeights(channelCount);
	const one = shelf(sampleRate);
	const two = highPass(sampleRate);
	const states = Array.from({ length: channelCount }, (): FilterState => ({ u1: 0, u2: 0, v1: 0, v2: 0, sum: 0 }));
	/** K-weighted mean square of each 100 ms, channels weighted and summed. */
	const powers: number[] = [];
	const edgeOf = (block: number): number => Math.round((block * sampleRate) / BLOCKS_A_SECOND);
	let done = 0; // samples
	let blocks = 0; // whole ones

	/** Filters samples from … to of a channel and adds their squares to its block. */
	const filter = (channel: Float32Array, from: number, to: number, state: FilterState): void => {
		let { u1, u2, v1, v2, sum } = state;
		for (let i = from; i < to; i++) {
			const x = channel[i];
			const y = one.b0 * x + u1;
			u1 = one.b1 * x - one.a1 * y + u2;
			u2 = one.b2 * x - one.a2 * y;
			const z = y + v1;
			v1 = -2 * y - two.a1 * z + v2;
			v2 = y - two.a2 * z;
			sum += z * z;
		}
		// a filter that has run into denormal numbers would be slow through minutes of silence
		if (Math.abs(u1) + Math.abs(v1) < 1e-30) u1 = u2 = v1 = v2 = 0;
		Object.assign(state, { u1, u2, v1, v2, sum });
	};
	return {
		push: (channels) => {
			const length = channels[0]?.length ?? 0;
			for (let at = 0; at < length; ) {
				const edge = edgeOf(blocks + 1);
				const to = Math.min(length, at + edge - done);
				for (let c = 0; c < channelCount; c++) if (weights[c] !== 0) filter(channels[c], at, to, states[c]);
				done += to - at;
				at = to;
				if (done < edge) break;
				let power = 0;
				for (let c = 0; c < channelCount; c++) {
					power += (weights[c] * states[c].sum) / (edge - edgeOf(blocks));
					states[c].sum = 0;
				}
				powers.push(power);
				blocks++;
			}
		},
		finish: () => loudnessOf(Float64Array.from(powers)),
	};
}

/** Mean power of the last `span` blocks at each block; before there are as many, of those there are against the span. */
function slidingMean(powers: Float64Array, span: number): Float64Array {
	const sums = new Float64Array(powers.length + 1);
	for (let i = 0; i < powers.length; i++) sums[i + 1] = sums[i] + powers[i];
	return Float64Array.from(powers, (_, i) => Math.max(0, sums[i + 1] - sums[Math.max(0, i + 1 - span)]) / span);
}

function integrate(momentary: Float64Array): number {
	const whole = momentary.subarray(Math.min(momentary.length, MOMENTARY_BLOCKS - 1));
	const gated = (gate: number): number => {
		let sum = 0;
		let count = 0;
		for (const power of whole) {
			if (power <= toPower(gate)) continue;
			sum += power;
			count++;
		}
		return count === 0 ? SILENCE : toLufs(sum / count);
	};
	const first = gated(ABSOLUTE_GATE);
	return first === SILENCE ? SILENCE : gated(Math.max(ABSOLUTE_GATE, first + RELATIVE_GATE));
}

function loudnessOf(powers: Float64Array): Loudness {
	const momentary = slidingMean(powers, MOMENTARY_BLOCKS);
	const shortTerm = slidingMean(powers, SHORT_TERM_BLOCKS);
	return {
		integrated: integrate(momentary),
		momentary: Float32Array.from(momentary, toLufs),
		shortTerm: Float32Array.from(shortTerm, toLufs),
		rate: BLOCKS_A_SECOND,
	};
}

/** @param channels samples at `sampleRate` Hz, −1..1, in the order of WAV files */
export function measureLoudness(channels: readonly Float32Array[], sampleRate: number): Loudness {
	const meter = createLoudnessMeter(sampleRate, channels.length);
	meter.push(channels);
	return meter.finish();
}
