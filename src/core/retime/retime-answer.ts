/** The machine-readable answer of a retime, as the command line writes it: plain JSON, seconds throughout. */
import type { EditMap, StretchKind } from "./edit-map.ts";
import type { CueMove, CueOffer, RetimeResult } from "./retime-show.ts";

export interface RetimeAnswer {
	readonly verdict: EditMap["verdict"];
	/** False where anything needs review: the command line then exits with 2. */
	readonly settled: boolean;
	readonly map: readonly {
		readonly kind: StretchKind;
		readonly old: readonly [number, number];
		readonly new: readonly [number, number];
		readonly rate: number | null;
		readonly confidence: number;
		readonly exact: boolean;
	}[];
	readonly joints: EditMap["joints"];
	readonly cues: readonly CueMove[];
	readonly offers: readonly { readonly of: string; readonly time: number; readonly reason: string }[];
	readonly notes: readonly string[];
	/** Seconds by what was done. */
	readonly timing: Readonly<Record<string, number>>;
}

/** @param timing seconds by stage, measured by whoever holds a clock */
export function retimeAnswer(
	map: EditMap,
	result: RetimeResult,
	timing: Readonly<Record<string, number>> = {},
): RetimeAnswer {
	return {
		verdict: map.verdict,
		settled: !result.needsReview,
		map: map.stretches.map(({ kind, old, new: to, rate, confidence, exact }) => ({
			kind,
			old: [tidySeconds(old[0]), tidySeconds(old[1])],
			new: [tidySeconds(to[0]), tidySeconds(to[1])],
			rate,
			confidence: Math.round(confidence * 1000) / 1000,
			exact,
		})),
		joints: map.joints,
		cues: result.cues,
		offers: result.offers.map(({ of, time, reason }: CueOffer) => ({ of, time, reason })),
		notes: result.notes,
		timing,
	};
}

/** Nanoseconds are finer than any sample; what lies below is rounding. */
const tidySeconds = (value: number): number => Math.round(value * 1e9) / 1e9;
