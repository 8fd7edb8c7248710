export { ANALYSIS_VERSION, type AnalyseOptions, analyse, SECTION_DETAILS } from "./analyse.ts";
export type { ActivationCurves, Analysis, Moment, MusicSection, Sound } from "./analysis.ts";
export { type Loudness, measureLoudness } from "./loudness.ts";
