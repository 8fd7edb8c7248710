/** fft.js 4 (F. Indutny) carries no types of its own; only what is used here is declared. */
declare module "fft.js" {
	export default class FFT {
		constructor(size: number);
		/** Interleaved complex in and out, each 2 · size long; the two must be different arrays. */
		transform(out: Float64Array, data: Float64Array): void;
		inverseTransform(out: Float64Array, data: Float64Array): void;
	}
}
