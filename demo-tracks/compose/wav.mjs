// 16-bit stereo WAV (RIFF), with a seeded triangular dither of one step.

import { seeded } from "./random.mjs";
import { RATE } from "./sound.mjs";

/** Bytes of a WAV file. */
export function wavBytes({ left, right }) {
	const samples = left.length;
	const bytes = Buffer.alloc(44 + samples * 4);
	bytes.write("RIFF", 0);
	bytes.writeUInt32LE(36 + samples * 4, 4);
	bytes.write("WAVEfmt ", 8);
	bytes.writeUInt32LE(16, 16);
	bytes.writeUInt16LE(1, 20);
	bytes.writeUInt16LE(2, 22);
	bytes.writeUInt32LE(RATE, 24);
	bytes.writeUInt32LE(RATE * 4, 28);
	bytes.writeUInt16LE(4, 32);
	bytes.writeUInt16LE(16, 34);
	bytes.write("data", 36);
	bytes.writeUInt32LE(samples * 4, 40);
	const random = seeded(16);
	const step = (value) => {
		const whole = Math.round(value * 32767 + random() - random());
		return Math.max(-32768, Math.min(32767, whole));
	};
	for (let i = 0; i < samples; i++) {
		bytes.writeInt16LE(step(left[i]), 44 + i * 4);
		bytes.writeInt16LE(step(right[i]), 46 + i * 4);
	}
	return bytes;
}
