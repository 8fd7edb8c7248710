import { writeWav } from "../cli/make-track.ts";

const RATE = 44100;

/** A 16-bit mono WAV without the samples between two seconds, as a music editor would cut it. */
export function cutTrack(wav: Uint8Array, from: number, to: number): Uint8Array {
	const view = new DataView(wav.buffer, wav.byteOffset + 44, wav.byteLength - 44);
	const samples = Float32Array.from({ length: view.byteLength / 2 }, (_, i) => view.getInt16(2 * i, true) / 32768);
	const [a, b] = [Math.round(from * RATE), Math.round(to * RATE)];
	const kept = new Float32Array(samples.length - (b - a));
	kept.set(samples.subarray(0, a), 0);
	kept.set(samples.subarray(b), a);
	return writeWav([kept], RATE);
}
