/** Decoded audio. Time 0 is the first sample, encoder delay removed. */
export interface Samples {
	/** Hz. */
	readonly sampleRate: number;
	/** One array a channel, −1..1, all of the same length. */
	readonly channels: readonly Float32Array[];
	/** What the file was: wav, mp3, flac, vorbis, opus. */
	readonly format: string;
	/** What the user should know: "8 kHz, so nothing above 4 kHz is heard", "six channels mixed to mono". */
	readonly notes: readonly string[];
}
