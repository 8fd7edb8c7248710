/** The beat network: likelihood of beats and downbeats, learnt from rendered music (`src/training`). */
import { resample } from "../../maths/index.ts";
import type { ActivationCurves } from "../analysis.ts";
import { type Bands, FRAME_RATE, HEARING_RATE, hearBands } from "../bands.ts";
import { type Harmony, hearHarmony } from "../harmony.ts";
import { levelOut, prepare } from "./features.ts";
import { infer } from "./infer.ts";
import { readWeights } from "./weights.ts";

export { HEARD_LEVEL, levelOut } from "./features.ts";

/**
 * Likelihood of beat and downbeat (0..1: the sigmoid of the network's logits) from what was heard of a whole track.
 * @param bands, harmony as `hearBands` and `hearHarmony` give them of a signal that went through `levelOut`
 * @param onProgress called with 0..1
 */
export function networkActivation(
	bands: Bands,
	harmony: Harmony,
	onProgress: (share: number) => void = () => {},
): ActivationCurves {
	const logits = infer(prepare(bands, harmony), readWeights(), onProgress);
	const beat = new Float32Array(bands.frames);
	const downbeat = new Float32Array(bands.frames);
	for (let i = 0; i < bands.frames; i++) {
		beat[i] = 1 / (1 + Math.exp(-logits[2 * i]));
		downbeat[i] = 1 / (1 + Math.exp(-logits[2 * i + 1]));
	}
	return { beat, downbeat, rate: FRAME_RATE };
}

/**
 * The same from samples.
 * @param mono samples at `sampleRate` Hz; left as they are
 */
export function beatActivation(
	mono: Float32Array,
	sampleRate: number,
	onProgress: (share: number) => void = () => {},
): ActivationCurves {
	const heard = levelOut(resample(mono, sampleRate, HEARING_RATE));
	const bands = hearBands(heard, (share) => onProgress(0.4 * share));
	return networkActivation(bands, hearHarmony(heard), (share) => onProgress(0.5 + 0.5 * share));
}
