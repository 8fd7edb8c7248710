export { bernsteinMatrix, binomials, halve } from "./bernstein.ts";
export { createGrowing, type Growing } from "./growing.ts";
export { createResampler, type Resampler, resample } from "./resample.ts";
export { createRandom, type SeededRandom } from "./seeded-random.ts";
export { createSha256, type Sha256, sha256Hex } from "./sha256.ts";
export { pairsWithin, type SmallestGap, smallestGap } from "./spatial-gap.ts";
export {
	createFrameSpectrum,
	createFrameStream,
	createRealTransform,
	type FrameStream,
	hannWindow,
	type RealTransform,
} from "./spectrum.ts";
