/**
 * The network's forward pass in plain loops over flat arrays: two small convolutions over the mel bands, then a temporal
 * convolutional network (Davies and Böck, 2019). `src/training/network.py` is the same network in PyTorch; a test holds
 * the two together.
 *
 * All arrays lie frame after frame, so that what is summed lies side by side; sums are made four outputs by two
 * frames at a time, in eight registers. Doubles inside: typed doubles are read without conversion, which is faster in
 * JavaScript than half the memory. The front end goes through in blocks of frames that stay in the cache.
 */
import {
	CHANNELS,
	FIRST,
	FIRST_BANDS,
	JOINED,
	KERNEL,
	type Layer,
	MEL_ROWS,
	type NetworkWeights,
	ROWS,
	SECOND,
	SECOND_BANDS,
} from "./weights.ts";

/** Frames that go through the front end together. */
const BLOCK = 128;

const elu = (x: number): number => (x > 0 ? x : Math.expm1(x));

/**
 * @param input frame i's ROWS values at i · ROWS, as `features.ts` gives them
 * @param onProgress called with 0..1
 * @returns logits, value 2 i of frame i for a beat, 2 i + 1 for a downbeat
 */
export function infer(
	input: Float32Array,
	weights: NetworkWeights,
	onProgress: (share: number) => void = () => {},
): Float32Array {
	const frames = input.length / ROWS;
	let now: Float64Array = new Float64Array(frames * CHANNELS);
	const joined = new Float64Array(BLOCK * JOINED);
	for (let from = 0; from < frames; from += BLOCK) {
		const count = Math.min(BLOCK, frames - from);
		readBands(input, frames, from, count, weights, joined);
		multiply(joined, count, JOINED, weights.join, now.subarray(from * CHANNELS, (from + count) * CHANNELS));
		onProgress((0.5 * (from + count)) / frames);
	}
	for (let i = 0; i < now.length; i++) now[i] = elu(now[i]);
	let next: Float64Array = new Float64Array(now.length);
	weights.blocks.forEach(({ wide, mix }, index) => {
		passBlock(now, frames, 2 ** index, wide, mix, next);
		[now, next] = [next, now];
		onProgress(0.5 + (0.5 * (index + 1)) / weights.blocks.length);
	});
	const logits = new Float32Array(frames * 2);
	const { weight, bias } = weights.out;
	for (let i = 0; i < frames; i++) {
		for (let o = 0; o < 2; o++) {
			let sum = bias[o];
			for (let c = 0; c < CHANNELS; c++) sum += weight[o * CHANNELS + c] * now[i * CHANNELS + c];
			logits[2 * i + o] = sum;
		}
	}
	return logits;
}

/** Width of a frame after the first pooling, with a silent band on either side. */
const PADDED = (FIRST_BANDS + 2) * FIRST;

/** Front end of frames `from` … `from + count`: writes JOINED values a frame (pooled bands, then chroma) to `joined`. */
function readBands(
	input: Float32Array,
	frames: number,
	from: number,
	count: number,
	weights: NetworkWeights,
	joined: Float64Array,
): void {
	// The second convolution looks one frame to either side, the first two more.
	const pooled = new Float64Array((count + 2) * PADDED);
	const patch = new Float64Array(KERNEL * (MEL_ROWS + 2));
	for (let i = 0; i < count + 2; i++) {
		const frame = from + i - 1;
		if (frame < 0 || frame >= frames) continue; // outside the track the second convolution sees zeros
		for (let t = 0; t < KERNEL; t++) {
			const source = frame + t - 2;
			const row = t * (MEL_ROWS + 2) + 1;
			for (let f = 0; f < MEL_ROWS; f++) {
				patch[row + f] = source >= 0 && source < frames ? input[source * ROWS + f] : 0;
			}
		}
		convolveFirst(patch, weights.first, pooled, i * PADDED + FIRST);
	}
	for (let i = 0; i < count; i++) {
		convolveSecond(pooled, i * PADDED, weights.second, joined, i * JOINED);
		for (let r = 0; r < ROWS - MEL_ROWS; r++) {
			joined[i * JOINED + SECOND * SECOND_BANDS + r] = input[(from + i) * ROWS + MEL_ROWS + r];
		}
	}
}

/** One frame of the first convolution, pooled by three bands: FIRST_BANDS × FIRST values from `at` on. */
function convolveFirst(patch: Float64Array, { weight, bias }: Layer, out: Float64Array, at: number): void {
	const width = MEL_ROWS + 2;
	for (let band = 0; band < FIRST_BANDS; band++) {
		for (let o = 0; o < FIRST; o += 2) {
			let a0 = 0;
			let a1 = 0;
			let a2 = 0;
			let b0 = 0;
			let b1 = 0;
			let b2 = 0;
			for (let t = 0; t < KERNEL; t++) {
				const x = t * width + band * 3;
				const x0 = patch[x];
				const x1 = patch[x + 1];
				const x2 = patch[x + 2];
				const x3 = patch[x + 3];
				const x4 = patch[x + 4];
				const w = (o * KERNEL + t) * 3;
				const u0 = weight[w];
				const u1 = weight[w + 1];
				const u2 = weight[w + 2];
				a0 += u0 * x0 + u1 * x1 + u2 * x2;
				a1 += u0 * x1 + u1 * x2 + u2 * x3;
				a2 += u0 * x2 + u1 * x3 + u2 * x4;
				const v0 = weight[w + KERNEL * 3];
				const v1 = weight[w + KERNEL * 3 + 1];
				const v2 = weight[w + KERNEL * 3 + 2];
				b0 += v0 * x0 + v1 * x1 + v2 * x2;
				b1 += v0 * x1 + v1 * x2 + v2 * x3;
				b2 += v0 * x2 + v1 * x3 + v2 * x4;
			}
			out[at + band * FIRST + o] = elu(Math.max(a0, a1, a2) + bias[o]);
			out[at + band * FIRST + o + 1] = elu(Math.max(b0, b1, b2) + bias[o + 1]);
		}
	}
}

/** One frame of the second convolution, pooled by four bands: SECOND_BANDS × SECOND values from `to` on. */
function convolveSecond(x: Float64Array, at: number, { weight, bias }: Layer, out: Float64Array, to: number): void {
	const span = 3 * FIRST; // three bands of one frame lie side by side
	const size = 3 * span;
	for (let group = 0; group < SECOND_BANDS; group++) {
		for (let o = 0; o < SECOND; o += 2) {
			let a0 = 0;
			let a1 = 0;
			let a2 = 0;
			let a3 = 0;
			let b0 = 0;
			let b1 = 0;
			let b2 = 0;
			let b3 = 0;
			for (let t = 0; t < 3; t++) {
				let p = at + t * PADDED + group * 4 * FIRST;
				let w = o * size + t * span;
				for (const end = p + span; p < end; p++, w++) {
					const u = weight[w];
					const v = weight[w + size];
					const x0 = x[p];
					const x1 = x[p + FIRST];
					const x2 = x[p + 2 * FIRST];
					const x3 = x[p + 3 * FIRST];
					a0 += u * x0;
					a1 += u * x1;
					a2 += u * x2;
					a3 += u * x3;
					b0 += v * x0;
					b1 += v * x1;
					b2 += v * x2;
					b3 += v * x3;
				}
			}
			out[to + group * SECOND + o] = elu(Math.max(a0, a1, a2, a3) + bias[o]);
			out[to + group * SECOND + o + 1] = elu(Math.max(b0, b1, b2, b3) + bias[o + 1]);
		}
	}
}

/** One residual block: x + mix(elu(wide(x))), frame by frame in blocks. */
function passBlock(
	x: Float64Array,
	frames: number,
	dilation: number,
	wide: Layer,
	mix: Layer,
	out: Float64Array,
): void {
	const span = CHANNELS * KERNEL;
	const gathered = new Float64Array(BLOCK * span);
	const middle = new Float64Array(BLOCK * CHANNELS);
	for (let from = 0; from < frames; from += BLOCK) {
		const count = Math.min(BLOCK, frames - from);
		for (let i = 0; i < count; i++) {
			for (let k = 0; k < KERNEL; k++) {
				const source = from + i + (k - 2) * dilation;
				const to = i * span + k * CHANNELS;
				if (source >= 0 && source < frames) {
					const at = source * CHANNELS;
					for (let c = 0; c < CHANNELS; c++) gathered[to + c] = x[at + c];
				} else gathered.fill(0, to, to + CHANNELS);
			}
		}
		multiply(gathered, count, span, wide, middle);
		for (let i = 0; i < count * CHANNELS; i++) middle[i] = elu(middle[i]);
		const part = out.subarray(from * CHANNELS, (from + count) * CHANNELS);
		multiply(middle, count, CHANNELS, mix, part);
		for (let i = 0; i < part.length; i++) part[i] += x[from * CHANNELS + i];
	}
}

/** CHANNELS outputs for each of `count` frames of `size` inputs: out = bias + weight · x. */
function multiply(x: Float64Array, count: number, size: number, { weight, bias }: Layer, out: Float64Array): void {
	for (let i = 0; i < count; i += 2) {
		const p = i * size;
		const q = i + 1 < count ? p + size : p; // an odd last frame is summed twice and written once
		for (let o = 0; o < CHANNELS; o += 4) {
			let a0 = bias[o];
			let a1 = bias[o + 1];
			let a2 = bias[o + 2];
			let a3 = bias[o + 3];
			let b0 = a0;
			let b1 = a1;
			let b2 = a2;
			let b3 = a3;
			const w0 = o * size;
			const w1 = w0 + size;
			const w2 = w1 + size;
			const w3 = w2 + size;
			for (let k = 0; k < size; k++) {
				const y = x[p + k];
				const z = x[q + k];
				const u0 = weight[w0 + k];
				const u1 = weight[w1 + k];
				const u2 = weight[w2 + k];
				const u3 = weight[w3 + k];
				a0 += u0 * y;
				a1 += u1 * y;
				a2 += u2 * y;
				a3 += u3 * y;
				b0 += u0 * z;
				b1 += u1 * z;
				b2 += u2 * z;
				b3 += u3 * z;
			}
			const to = i * CHANNELS + o;
			out[to] = a0;
			out[to + 1] = a1;
			out[to + 2] = a2;
			out[to + 3] = a3;
			if (q !== p) {
				out[to + CHANNELS] = b0;
				out[to + CHANNELS + 1] = b1;
				out[to + CHANNELS + 2] = b2;
				out[to + CHANNELS + 3] = b3;
			}
		}
	}
}
