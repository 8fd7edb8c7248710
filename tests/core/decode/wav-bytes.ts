/** Writes 16-bit WAV bytes for the tests, by the chunk layout of RIFF/WAVE and without anything of src. */
export function wavBytes(channels: readonly Float32Array[], sampleRate: number, oddChunk = false): Uint8Array {
	const frames = channels[0].length;
	const data = frames * channels.length * 2;
	const extra = oddChunk ? 8 + 3 + 1 : 0;
	const bytes = new Uint8Array(44 + extra + data);
	const view = new DataView(bytes.buffer);
	const text = (at: number, s: string) => {
		for (let i = 0; i < s.length; i++) bytes[at + i] = s.charCodeAt(i);
	};
	text(0, "RIFF");
	view.setUint32(4, bytes.length - 8, true);
	text(8, "WAVEfmt ");
	view.setUint32(16, 16, true);
	view.setUint16(20, 1, true);
	view.setUint16(22, channels.length, true);
	view.setUint32(24, sampleRate, true);
	view.setUint32(28, sampleRate * channels.length * 2, true);
	view.setUint16(32, channels.length * 2, true);
	view.setUint16(34, 16, true);
	if (oddChunk) {
		text(36, "note");
		view.setUint32(40, 3, true);
	}
	text(36 + extra, "data");
	view.setUint32(40 + extra, data, true);
	for (let i = 0, at = 44 + extra; i < frames; i++) {
		for (const channel of channels) {
			view.setInt16(at, Math.round(Math.max(-1, Math.min(1, channel[i])) * 32_767), true);
			at += 2;
		}
	}
	return bytes;
}
