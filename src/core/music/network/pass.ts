/** What a pass through the network works with: one arena of gathered rows, answers and weights. */
import { createMultiplier, type Multiplier, ROWS_TOGETHER } from "./multiply.ts";
import { CHANNELS, FIRST, FIRST_BANDS, KERNEL, type Layer, MEL_ROWS, SECOND } from "./weights.ts";

/** Frames that go through a layer together; a multiple of 4. */
export const BLOCK = 64;
/** Inputs of one output of the first and second convolution, and of a block's. */
export const FIRST_SIZE = KERNEL * 3;
export const SECOND_SIZE = 9 * FIRST;
export const WIDE_SIZE = KERNEL * CHANNELS;
/** Numbers gathered for a block of frames: the second convolution needs most. The first sees two frames more. */
const GATHERED = Math.max((BLOCK + 4) * MEL_ROWS * FIRST_SIZE, BLOCK * FIRST_BANDS * SECOND_SIZE);
const ANSWERED = (BLOCK + 4) * MEL_ROWS * SECOND;

/** In double precision e^x − 1 is exact enough for single where `expm1`, which is slower, would matter. */
export const elu = (x: number): number => (x > 0 ? x : Math.exp(x) - 1);

/** A layer in the multiplier's arena. */
export interface Placed {
	readonly weight: number;
	readonly bias: number;
	readonly size: number;
	readonly outputs: number;
}

/** Everything a pass works with: one arena holds gathered rows, answers and weights. */
export interface Pass {
	readonly multiplier: Multiplier;
	/** Where rows are gathered, and where the answers of a multiplication go. */
	readonly rows: number;
	readonly answer: number;
	readonly place: (layer: Layer) => Placed;
}

export function startPass(): Pass {
	const most = WIDE_SIZE * CHANNELS + CHANNELS; // the largest layer, with its biases
	const multiplier = createMultiplier(GATHERED + ANSWERED + 2 * most);
	const { arena } = multiplier;
	let next = GATHERED + ANSWERED;
	const place = ({ weight, bias }: Layer): Placed => {
		const size = weight.length / bias.length;
		const outputs = Math.ceil(bias.length / 8) * 8;
		// Two layers are in use at a time at most; a third goes where the first was.
		if (next + (size + 1) * outputs > arena.length) next = GATHERED + ANSWERED;
		const at = next;
		arena.fill(0, at, at + (size + 1) * outputs);
		for (let o = 0; o < bias.length; o++) {
			for (let k = 0; k < size; k++) arena[at + k * outputs + o] = weight[o * size + k];
			arena[at + size * outputs + o] = bias[o];
		}
		next = at + (size + 1) * outputs;
		return { weight: at, bias: at + size * outputs, size, outputs };
	};
	return { multiplier, rows: 0, answer: GATHERED, place };
}

/** Multiplies what is gathered; `count` rows, filled up to a multiple of four with whatever lies there. */
export function run({ multiplier, rows, answer }: Pass, layer: Placed, count: number): void {
	const full = Math.ceil(count / ROWS_TOGETHER) * ROWS_TOGETHER;
	multiplier.multiply(rows, layer.weight, layer.bias, answer, full, layer.size, layer.outputs);
}

/** Where row r's first value is gathered; its value k lies 4 k further. */
export const rowAt = (row: number, size: number): number => (row >> 2) * 4 * size + (row & 3);

/** Where value c of a frame lies among the residual blocks' values: at frameAt(frame) + 4 c, as the multiplier reads rows. */
export const frameAt = (frame: number): number => rowAt(frame, CHANNELS);
