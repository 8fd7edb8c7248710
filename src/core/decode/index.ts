export { decodeAudio, gatherSamples } from "./decode-audio.ts";
export { recogniseFormat, type SoundFormat } from "./format.ts";
export { mixToMono } from "./mix-to-mono.ts";
export type { Samples } from "./samples.ts";
