export {
	ANALYSIS_VERSION,
	type AnalyseOptions,
	analyse,
	analysePieces,
	DOUBTFUL,
	SECTION_DETAILS,
	type SoundPiece,
} from "./analyse.ts";
export type { ActivationCurves, Analysis, Moment, MusicSection, Sound } from "./analysis.ts";
export { doubtfulBeats, doubtfulPlaces } from "./doubtful-beats.ts";
export { fitTaps, type TapFit } from "./fit-taps.ts";
export { type Loudness, measureLoudness } from "./loudness.ts";
export { nearestOnset } from "./nearest-onset.ts";
