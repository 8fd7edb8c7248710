/**
 * What retiming is held against: one offset and one stretch for the whole soundtrack, from the best cross-correlation of
 * onset envelopes over a few dozen stretches. It imports nothing of the method that it is compared with.
 */
import type { Samples } from "../../src/core/decode/index.ts";
import { createRealTransform } from "../../src/core/maths/index.ts";

/** Values of the envelope a second. */
const RATE = 200;
const LEAST_STRETCH = 0.92;
const MOST_STRETCH = 1.08;
const STRETCH_STEP = 0.0025;

/** new = offset + stretch × old, seconds. */
export interface GlobalFit {
	readonly offset: number;
	readonly stretch: number;
}

export function fitGlobally(old: Samples, current: Samples): GlobalFit {
	const a = onsets(old);
	const b = onsets(current);
	let size = 4;
	while (size < Math.ceil(a.length * MOST_STRETCH) + b.length) size *= 2;
	const transform = createRealTransform(size);
	const spectrum = new Float64Array(size + 2);
	transform.forward(padded(b, size), spectrum);
	let best = { offset: 0, stretch: 1, score: Number.NEGATIVE_INFINITY };
	const other = new Float64Array(size + 2);
	const product = new Float64Array(size + 2);
	const correlation = new Float64Array(size);
	for (let n = 0; LEAST_STRETCH + n * STRETCH_STEP <= MOST_STRETCH + 1e-9; n++) {
		const stretch = LEAST_STRETCH + n * STRETCH_STEP;
		transform.forward(padded(stretched(a, stretch), size), other);
		for (let k = 0; k <= size; k += 2) {
			product[k] = spectrum[k] * other[k] + spectrum[k + 1] * other[k + 1];
			product[k + 1] = spectrum[k + 1] * other[k] - spectrum[k] * other[k + 1];
		}
		transform.inverse(product, correlation);
		for (let i = 0; i < size; i++) {
			if (correlation[i] <= best.score) continue;
			const [before, top, after] = [correlation[(i + size - 1) % size], correlation[i], correlation[(i + 1) % size]];
			const bend = before - 2 * top + after;
			const part = bend < 0 ? (0.5 * (before - after)) / bend : 0;
			const lag = i < size / 2 ? i : i - size;
			best = { offset: (lag + part) / RATE, stretch, score: top };
		}
	}
	return best;
}

/** Rise of log energy, mean taken off. */
function onsets(samples: Samples): Float64Array {
	const [channel] = samples.channels;
	const step = samples.sampleRate / RATE;
	const count = Math.floor(channel.length / step);
	const energy = new Float64Array(count);
	for (let i = 0; i < count; i++) {
		let sum = 0;
		for (let j = Math.round(i * step); j < Math.round((i + 1) * step); j++) sum += channel[j] * channel[j];
		energy[i] = Math.log(1e-5 + sum / step);
	}
	const out = new Float64Array(count);
	let mean = 0;
	for (let i = 1; i < count; i++) {
		out[i] = Math.max(0, energy[i] - energy[i - 1]);
		mean += out[i] / count;
	}
	for (let i = 0; i < count; i++) out[i] -= mean;
	return out;
}

function stretched(values: Float64Array, stretch: number): Float64Array {
	const out = new Float64Array(Math.floor((values.length - 1) * stretch));
	for (let i = 0; i < out.length; i++) {
		const at = i / stretch;
		const whole = Math.floor(at);
		out[i] = values[whole] + (at - whole) * (values[Math.min(values.length - 1, whole + 1)] - values[whole]);
	}
	return out;
}

function padded(values: Float64Array, size: number): Float64Array {
	const out = new Float64Array(size);
	out.set(values.subarray(0, size));
	return out;
}
