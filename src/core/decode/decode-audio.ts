/** A whole soundtrack at once, for what needs all of its samples: playing it, holding two against each other. */
import { sourceOf } from "./byte-source.ts";
import { openAudio } from "./open-audio.ts";
import type { Samples } from "./samples.ts";

/**
 * Decodes a whole soundtrack.
 * @param bytes the file as it is
 * @param name the file's name, for messages only
 * @returns samples at the file's own rate, with notes on whatever is unusual about it
 * @throws StarstaveError where the file is empty, is not audio, holds no samples, or is AAC (which only a browser decodes)
 */
export async function decodeAudio(bytes: Uint8Array, name: string): Promise<Samples> {
	const stream = await openAudio(sourceOf(bytes), name, bytes.length);
	const parts: (readonly Float32Array[])[] = [];
	let sampleRate = 0;
	for await (const piece of stream.pieces()) {
		sampleRate = piece.sampleRate;
		parts.push(piece.channels);
	}
	return { sampleRate, channels: join(parts), format: stream.format, notes: stream.notes() };
}

/** One array a channel; no copy where there is only one part. */
function join(parts: readonly (readonly Float32Array[])[]): readonly Float32Array[] {
	if (parts.length === 1) return parts[0];
	const length = parts.reduce((sum, [first]) => sum + first.length, 0);
	return parts[0].map((_, channel) => {
		const whole = new Float32Array(length);
		let at = 0;
		for (const part of parts) {
			whole.set(part[channel], at);
			at += part[channel].length;
		}
		return whole;
	});
}
