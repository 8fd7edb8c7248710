export type { NightViewpoint } from "./camera.ts";
export type { GroundMarks } from "./ground-marks.ts";
export type { NightMarks } from "./marks.ts";
export { createNightView, type NightFrame, type NightView } from "./night-view.ts";
