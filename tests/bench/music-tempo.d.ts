/** music-tempo 1.0.3 carries no types; only what the bench uses is declared. */
declare module "music-tempo" {
	export default class MusicTempo {
		/** @param audio mono samples at 44.1 kHz */
		constructor(audio: Float32Array);
		readonly beats: number[];
	}
}
