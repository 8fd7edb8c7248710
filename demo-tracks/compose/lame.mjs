// Reads what the LAME header of an MP3 says about the silence that the encoder put round the music.

// Samples that any decoder adds before the first one of the encoder (the MP3 synthesis filter bank's own delay + 1).
const DECODER_DELAY = 529;

/**
 * { source, samples, padding, skip } of an MP3 with a Xing or Info header: `samples` the encoder put before the music,
 * `padding` after it, `skip` what a decoder has to drop at the start of its output (both delays together).
 */
export function readLameDelay(bytes) {
	const text = bytes.subarray(0, 4096).toString("latin1");
	const mark = Math.max(text.indexOf("Xing"), text.indexOf("Info"));
	if (mark < 0) throw new Error("this MP3 has no Xing or Info header, so its encoder delay is not known");
	const flags = bytes.readUInt32BE(mark + 4);
	// Optional fields: frame count, byte count, seek table, quality.
	const fields = (flags & 1 ? 4 : 0) + (flags & 2 ? 4 : 0) + (flags & 4 ? 100 : 0) + (flags & 8 ? 4 : 0);
	// 9 bytes of encoder name and 12 of other figures stand before the delays.
	const at = mark + 8 + fields + 21;
	const packed = bytes.readUIntBE(at, 3);
	const samples = packed >> 12;
	return {
		source: "LAME header",
		samples,
		padding: packed & 0xfff,
		skip: samples + DECODER_DELAY,
	};
}
