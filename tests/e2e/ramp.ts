/** A mono 32-bit float WAV whose samples rise from 0 to 0.9: each says where in the music it is. */
export function writeRamp(seconds: number, rate: number): Buffer {
	const count = seconds * rate;
	const bytes = Buffer.alloc(58 + 4 * count);
	bytes.write("RIFF", 0);
	bytes.writeUInt32LE(50 + 4 * count, 4);
	bytes.write("WAVEfmt ", 8);
	bytes.writeUInt32LE(18, 16);
	bytes.writeUInt16LE(3, 20);
	bytes.writeUInt16LE(1, 22);
	bytes.writeUInt32LE(rate, 24);
	bytes.writeUInt32LE(rate * 4, 28);
	bytes.writeUInt16LE(4, 32);
	bytes.writeUInt16LE(32, 34);
	bytes.write("fact", 38);
	bytes.writeUInt32LE(4, 42);
	bytes.writeUInt32LE(count, 46);
	bytes.write("data", 50);
	bytes.writeUInt32LE(4 * count, 54);
	for (let i = 0; i < count; i++) bytes.writeFloatLE((0.9 * i) / count, 58 + 4 * i);
	return bytes;
}
