/**
 * The trained weights, unpacked: float16 in base64, in the order that the training framework lists them. A text module
 * works the same in a page, a worker and Node, with nothing to fetch.
 */
import { StarstaveError } from "../../units/index.ts";
import { WEIGHTS } from "./weights-data.ts";

/** Mel bands and chroma rows that the network reads, in this order. */
export const MEL_ROWS = 48;
export const CHROMA_ROWS = 24;
export const ROWS = MEL_ROWS + CHROMA_ROWS;
/** Channels after the first and second convolution, and in the blocks. */
export const FIRST = 12;
export const SECOND = 16;
export const CHANNELS = 32;
/** Frequencies left after each pooling (by 3, then by 4). */
export const FIRST_BANDS = 16;
export const SECOND_BANDS = 4;
export const JOINED = SECOND * SECOND_BANDS + CHROMA_ROWS;
export const KERNEL = 5;
export const BLOCKS = 9;

/** Numbers in all: 60 722. */
const COUNT =
	FIRST * (15 + 1) +
	SECOND * (FIRST * 9 + 1) +
	CHANNELS * (JOINED + 1) +
	BLOCKS * CHANNELS * (CHANNELS * (KERNEL + 1) + 2) +
	2 * (CHANNELS + 1);

/** One layer: `weight` as [out][in …] flattened in the order that `infer.ts` reads, `bias` [out]. */
export interface Layer {
	readonly weight: Float64Array;
	readonly bias: Float64Array;
}

export interface NetworkWeights {
	/** [out 12][time 5][frequency 3] */
	readonly first: Layer;
	/** [out 16][time 3][frequency 3][in 12] */
	readonly second: Layer;
	/** [out 32][band 4][channel 16], then 24 chroma rows */
	readonly join: Layer;
	/** `wide` [out 32][tap 5][in 32], `mix` [out 32][in 32]; block i is dilated by 2^i frames */
	readonly blocks: readonly { readonly wide: Layer; readonly mix: Layer }[];
	/** [beat, downbeat][in 32] */
	readonly out: Layer;
}

const ALPHABET = "ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789+/";

/** Bytes of a base64 text (RFC 4648); written out because a page and Node share no decoder that needs no types of either. */
export function readBase64(text: string): Uint8Array {
	const values = new Uint8Array(128);
	for (let i = 0; i < 64; i++) values[ALPHABET.charCodeAt(i)] = i;
	const length = text.indexOf("=") < 0 ? text.length : text.indexOf("=");
	const bytes = new Uint8Array(Math.floor((length * 3) / 4));
	let held = 0;
	let bits = 0;
	let at = 0;
	for (let i = 0; i < length; i++) {
		held = ((held << 6) | values[text.charCodeAt(i)]) & 0xffff;
		bits += 6;
		if (bits >= 8) {
			bits -= 8;
			bytes[at++] = (held >> bits) & 255;
		}
	}
	return bytes;
}

/** Value of an IEEE 754 half-precision number given as its sixteen bits. */
export function readHalf(bits: number): number {
	const sign = bits & 0x8000 ? -1 : 1;
	const exponent = (bits >> 10) & 31;
	const fraction = bits & 1023;
	if (exponent === 0) return sign * fraction * 2 ** -24;
	if (exponent === 31) return fraction ? Number.NaN : sign * Number.POSITIVE_INFINITY;
	return sign * (1 + fraction / 1024) * 2 ** (exponent - 15);
}

/** Turns [a][b][c] into [a][c][b]: the reader wants what it sums over to lie side by side. */
function swapLast(values: Float64Array, a: number, b: number, c: number): Float64Array {
	const out = new Float64Array(values.length);
	for (let i = 0; i < a; i++) {
		for (let j = 0; j < b; j++) for (let k = 0; k < c; k++) out[(i * c + k) * b + j] = values[(i * b + j) * c + k];
	}
	return out;
}

/**
 * @param text the weights as `src/training/export.py` writes them; the committed ones unless told
 * @throws StarstaveError where their number isn't the network's
 */
export function readWeights(text: string = WEIGHTS): NetworkWeights {
	const bytes = readBase64(text);
	const all = Float64Array.from({ length: bytes.length >> 1 }, (_, i) =>
		readHalf(bytes[2 * i] | (bytes[2 * i + 1] << 8)),
	);
	if (all.length !== COUNT) {
		throw new StarstaveError(
			"program",
			`The beat network's weights hold ${all.length} numbers where ${COUNT} are needed: write them anew with src/training/export.py.`,
		);
	}
	let at = 0;
	const take = (count: number): Float64Array => {
		at += count;
		return all.slice(at - count, at);
	};
	// PyTorch's order: first [12][1][3 frequency][5 time], second [16][12][3][3], join [32][88], then the blocks.
	const first = { weight: swapLast(take(FIRST * 15), FIRST, 3, 5), bias: take(FIRST) };
	const second = {
		// [out][in][frequency · time] → [out][frequency · time][in] → [out][time][frequency][in]
		weight: swapTaps(swapLast(take(SECOND * FIRST * 9), SECOND, FIRST, 9)),
		bias: take(SECOND),
	};
	const joinWeight = take(CHANNELS * JOINED);
	const join = { weight: reorderJoin(joinWeight), bias: take(CHANNELS) };
	const blocks = Array.from({ length: BLOCKS }, () => ({
		wide: { weight: swapLast(take(CHANNELS * CHANNELS * KERNEL), CHANNELS, CHANNELS, KERNEL), bias: take(CHANNELS) },
		mix: { weight: take(CHANNELS * CHANNELS), bias: take(CHANNELS) },
	}));
	const out = { weight: take(2 * CHANNELS), bias: take(2) };
	return { first, second, join, blocks, out };
}

/** [out][frequency 3][time 3][in] → [out][time][frequency][in] */
function swapTaps(weight: Float64Array): Float64Array {
	const out = new Float64Array(weight.length);
	for (let o = 0; o < SECOND; o++) {
		for (let f = 0; f < 3; f++) {
			for (let t = 0; t < 3; t++) {
				const from = (o * 9 + f * 3 + t) * FIRST;
				out.set(weight.subarray(from, from + FIRST), (o * 9 + t * 3 + f) * FIRST);
			}
		}
	}
	return out;
}

/** PyTorch flattens [channel 16][band 4]; the reader keeps the channels of a band side by side. */
function reorderJoin(weight: Float64Array): Float64Array {
	const out = weight.slice();
	for (let o = 0; o < CHANNELS; o++) {
		for (let c = 0; c < SECOND; c++) {
			for (let b = 0; b < SECOND_BANDS; b++)
				out[o * JOINED + b * SECOND + c] = weight[o * JOINED + c * SECOND_BANDS + b];
		}
	}
	return out;
}
