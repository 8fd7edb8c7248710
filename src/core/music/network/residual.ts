/** The residual blocks of the temporal convolutional network. */
import { BLOCK, elu, frameAt, type Pass, type Placed, rowAt, run, WIDE_SIZE } from "./pass.ts";
import { CHANNELS, KERNEL } from "./weights.ts";

/**
 * One residual block: x + mix(elu(wide(x))).
 * @param x values in fours of frames (see frameAt); what lies past the last frame is zero
 */
export function passBlock(
	pass: Pass,
	x: Float32Array,
	frames: number,
	dilation: number,
	wide: Placed,
	mix: Placed,
	out: Float32Array,
): void {
	const { arena } = pass.multiplier;
	for (let from = 0; from < frames; from += BLOCK) {
		const count = Math.min(BLOCK, frames - from);
		if (dilation % 4 === 0) gatherFours(pass, x, from, count, dilation);
		else gatherFrames(pass, x, frames, from, count, dilation);
		run(pass, wide, count);
		for (let i = 0; i < count; i++) {
			const row = pass.rows + frameAt(i);
			const answer = pass.answer + i * CHANNELS;
			for (let c = 0; c < CHANNELS; c++) arena[row + 4 * c] = elu(arena[answer + c]);
		}
		run(pass, mix, count);
		for (let i = 0; i < count; i++) {
			const at = frameAt(from + i);
			const answer = pass.answer + i * CHANNELS;
			for (let c = 0; c < CHANNELS; c++) out[at + 4 * c] = x[at + 4 * c] + arena[answer + c];
		}
	}
}

/** Four frames at a time: by a multiple of four further they lie side by side as well. */
function gatherFours(
	{ multiplier: { arena }, rows }: Pass,
	x: Float32Array,
	from: number,
	count: number,
	dilation: number,
) {
	const size = 4 * CHANNELS;
	for (let i = 0; i < count; i += 4) {
		for (let tap = 0; tap < KERNEL; tap++) {
			const to = rows + rowAt(i, WIDE_SIZE) + tap * size;
			const source = frameAt(from + i + (tap - 2) * dilation);
			if (source < 0 || source >= x.length) arena.fill(0, to, to + size);
			else for (let k = 0; k < size; k++) arena[to + k] = x[source + k];
		}
	}
}

function gatherFrames(
	{ multiplier: { arena }, rows }: Pass,
	x: Float32Array,
	frames: number,
	from: number,
	count: number,
	dilation: number,
): void {
	for (let i = 0; i < count; i++) {
		for (let tap = 0; tap < KERNEL; tap++) {
			const frame = from + i + (tap - 2) * dilation;
			const inside = frame >= 0 && frame < frames;
			const to = rows + rowAt(i, WIDE_SIZE) + 4 * tap * CHANNELS;
			const source = frameAt(frame);
			for (let c = 0; c < CHANNELS; c++) arena[to + 4 * c] = inside ? x[source + 4 * c] : 0;
		}
	}
}
