import type { Sound } from "./player.ts";

/**
 * Decodes what the program's own decoders don't know (AAC) by the browser's. The browser resamples to the context's rate,
 * so one of the usual rates is asked for.
 */
export async function decodeInBrowser(bytes: Uint8Array): Promise<Sound> {
	const context = new OfflineAudioContext({ numberOfChannels: 2, length: 1, sampleRate: 48000 });
	// A copy: the browser takes the buffer that it is handed away.
	const decoded = await context.decodeAudioData(bytes.slice().buffer);
	const channels = Array.from({ length: decoded.numberOfChannels }, (_, i) => decoded.getChannelData(i).slice());
	return { sampleRate: decoded.sampleRate, channels };
}
