/**
 * The network's forward pass: two small convolutions over the mel bands, then a temporal convolutional network (Davies
 * and Böck, 2019). `src/training/network.py` is the same network in PyTorch; a test holds the two together.
 *
 * Every layer is a gathering of inputs into rows and one multiplication (multiply.ts), block by block of frames, so
 * that what is gathered stays in the cache. Arrays lie frame after frame.
 */
import { ROWS_TOGETHER } from "./multiply.ts";
import { BLOCK, elu, FIRST_SIZE, frameAt, type Pass, type Placed, rowAt, run, SECOND_SIZE, startPass } from "./pass.ts";
import { passBlock } from "./residual.ts";
import {
	CHANNELS,
	CHROMA_ROWS,
	FIRST,
	FIRST_BANDS,
	JOINED,
	KERNEL,
	MEL_ROWS,
	type NetworkWeights,
	ROWS,
	SECOND,
	SECOND_BANDS,
} from "./weights.ts";

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
	const pass = startPass();
	let now = joinBands(pass, input, readBands(pass, input, frames, weights, onProgress), weights);
	let next: Float32Array = new Float32Array(now.length);
	weights.blocks.forEach((block, index) => {
		passBlock(pass, now, frames, 2 ** index, pass.place(block.wide), pass.place(block.mix), next);
		[now, next] = [next, now];
		onProgress(0.5 + (0.5 * (index + 1)) / weights.blocks.length);
	});
	const logits = new Float32Array(frames * 2);
	const { weight, bias } = weights.out;
	for (let i = 0; i < frames; i++) {
		for (let o = 0; o < 2; o++) {
			let sum = bias[o];
			for (let c = 0; c < CHANNELS; c++) sum += weight[o * CHANNELS + c] * now[frameAt(i) + 4 * c];
			logits[2 * i + o] = sum;
		}
	}
	return logits;
}

/** The two convolutions over the mel bands: SECOND_BANDS × SECOND values a frame. */
function readBands(
	pass: Pass,
	input: Float32Array,
	frames: number,
	weights: NetworkWeights,
	onProgress: (share: number) => void,
): Float32Array {
	const out = new Float32Array(frames * SECOND_BANDS * SECOND);
	const first = pass.place(weights.first);
	const second = pass.place(weights.second);
	// Pooled bands of the block, one frame more on either side, a silent band below and above.
	const padded = (FIRST_BANDS + 2) * FIRST;
	const pooled = new Float32Array((BLOCK + 2) * padded);
	for (let from = 0; from < frames; from += BLOCK) {
		const count = Math.min(BLOCK, frames - from);
		convolveFirst(pass, first, input, frames, from - 1, count + 2, pooled);
		convolveSecond(pass, second, pooled, count, out, from * SECOND_BANDS * SECOND);
		onProgress((0.5 * (from + count)) / frames);
	}
	return out;
}

/** Frames `from` … `from + count` of the first convolution, pooled by three bands, into `pooled`. */
function convolveFirst(
	pass: Pass,
	layer: Placed,
	input: Float32Array,
	frames: number,
	from: number,
	count: number,
	pooled: Float32Array,
): void {
	const { arena } = pass.multiplier;
	const padded = (FIRST_BANDS + 2) * FIRST;
	for (let i = 0; i < count; i++) {
		for (let t = 0; t < KERNEL; t++) {
			const frame = from + i + t - 2;
			const inside = frame >= 0 && frame < frames;
			for (let band = 0; band < MEL_ROWS; band++) {
				const to = pass.rows + rowAt(i * MEL_ROWS + band, FIRST_SIZE) + 4 * 3 * t;
				const at = frame * ROWS + band;
				arena[to] = inside && band > 0 ? input[at - 1] : 0;
				arena[to + 4] = inside ? input[at] : 0;
				arena[to + 8] = inside && band + 1 < MEL_ROWS ? input[at + 1] : 0;
			}
		}
	}
	run(pass, layer, count * MEL_ROWS);
	for (let i = 0; i < count; i++) {
		const to = i * padded + FIRST;
		if (from + i < 0 || from + i >= frames) {
			pooled.fill(0, to, to + FIRST_BANDS * FIRST); // outside the track the second convolution sees zeros
			continue;
		}
		for (let band = 0; band < FIRST_BANDS; band++) {
			const at = pass.answer + (i * MEL_ROWS + 3 * band) * layer.outputs;
			for (let o = 0; o < FIRST; o++) {
				const highest = Math.max(arena[at + o], arena[at + layer.outputs + o], arena[at + 2 * layer.outputs + o]);
				pooled[to + band * FIRST + o] = elu(highest);
			}
		}
	}
}

/** `count` frames of the second convolution, pooled by four bands, into `out` from `to` on. */
function convolveSecond(
	pass: Pass,
	layer: Placed,
	pooled: Float32Array,
	count: number,
	out: Float32Array,
	to: number,
): void {
	const { arena } = pass.multiplier;
	const padded = (FIRST_BANDS + 2) * FIRST;
	const span = 3 * FIRST; // three bands of one frame lie side by side
	for (let i = 0; i < count; i++) {
		for (let band = 0; band < FIRST_BANDS; band++) {
			const row = pass.rows + rowAt(i * FIRST_BANDS + band, SECOND_SIZE);
			for (let t = 0; t < 3; t++) {
				const at = (i + t) * padded + band * FIRST;
				const start = row + 4 * t * span;
				for (let k = 0; k < span; k++) arena[start + 4 * k] = pooled[at + k];
			}
		}
	}
	run(pass, layer, count * FIRST_BANDS);
	for (let group = 0; group < count * SECOND_BANDS; group++) {
		const at = pass.answer + 4 * group * SECOND;
		for (let o = 0; o < SECOND; o++) {
			const highest = Math.max(
				arena[at + o],
				arena[at + SECOND + o],
				arena[at + 2 * SECOND + o],
				arena[at + 3 * SECOND + o],
			);
			out[to + group * SECOND + o] = elu(highest);
		}
	}
}

/** Bands and chroma to CHANNELS values a frame, in fours of frames (see frameAt). */
function joinBands(pass: Pass, input: Float32Array, bands: Float32Array, weights: NetworkWeights): Float32Array {
	const frames = input.length / ROWS;
	const out = new Float32Array(Math.ceil(frames / ROWS_TOGETHER) * ROWS_TOGETHER * CHANNELS);
	const { arena } = pass.multiplier;
	const layer = pass.place(weights.join);
	const fromBands = SECOND_BANDS * SECOND;
	for (let from = 0; from < frames; from += BLOCK) {
		const count = Math.min(BLOCK, frames - from);
		for (let i = 0; i < count; i++) {
			const row = pass.rows + rowAt(i, JOINED);
			for (let k = 0; k < fromBands; k++) arena[row + 4 * k] = bands[(from + i) * fromBands + k];
			const chroma = (from + i) * ROWS + MEL_ROWS;
			for (let k = 0; k < CHROMA_ROWS; k++) arena[row + 4 * (fromBands + k)] = input[chroma + k];
		}
		run(pass, layer, count);
		for (let i = 0; i < count; i++) {
			const at = frameAt(from + i);
			const answer = pass.answer + i * CHANNELS;
			for (let c = 0; c < CHANNELS; c++) out[at + 4 * c] = elu(arena[answer + c]);
		}
	}
	return out;
}
