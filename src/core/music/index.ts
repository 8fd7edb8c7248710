export type { ActivationCurves, Analysis, Moment, MusicSection } from "./analysis.ts";
