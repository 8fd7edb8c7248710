export { drawVerdict } from "./draw-beams.ts";
export type { DragPart } from "./pointing.ts";
export { paintColours, worstVerdict } from "./row-cues.ts";
export { createStaves, type Staves, type StavesHandlers, type StavesModel } from "./staves.ts";
export { STYLE_NONCE } from "./waveform.ts";
