/** The beat network: likelihood of beats and downbeats, learnt from rendered music (`src/training`). */
import type { ActivationCurves } from "../analysis.ts";
import { type Bands, FRAME_RATE } from "../bands.ts";
import type { Harmony } from "../harmony.ts";
import { prepare } from "./features.ts";
import { infer } from "./infer.ts";
import { readWeights } from "./weights.ts";

/**
 * Likelihood of beat and downbeat (0..1: the sigmoid of the network's logits) from what was heard of a whole track.
 * @param bands, harmony of the track at HEARD_LEVEL (listen.ts)
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
