export { type ByteSource, sourceOf } from "./byte-source.ts";
export { decodeAudio } from "./decode-audio.ts";
export { recogniseFormat, type SoundFormat } from "./format.ts";
export { type AudioPiece, type AudioStream, openAudio } from "./open-audio.ts";
export type { Samples } from "./samples.ts";
