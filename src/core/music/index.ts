export { ANALYSIS_VERSION, type AnalyseOptions, analyse } from "./analyse.ts";
export type { ActivationCurves, Analysis, Moment, MusicSection, Sound } from "./analysis.ts";
export { type Loudness, measureLoudness } from "./loudness.ts";
