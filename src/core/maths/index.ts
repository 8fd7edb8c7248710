export { resample, resampleMix } from "./resample.ts";
export { createRandom, type SeededRandom } from "./seeded-random.ts";
export { createFrameSpectrum, createRealTransform, hannWindow, type RealTransform } from "./spectrum.ts";
