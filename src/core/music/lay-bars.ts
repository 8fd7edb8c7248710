/**
 * Bars over given beats: the cheapest division into bars by dynamic programming. Each beat carries evidence that it
 * begins a bar; every bar gains that of its first beat and loses that of the others. The metre may change at a bar
 * line, at a price, and the first bar may be incomplete (a pickup).
 */

/** Beats in a bar, with what each beat costs in it: common time needs no excuse. */
const METRES: readonly { readonly beats: number; readonly cost: number }[] = [
	{ beats: 4, cost: 0 },
	{ beats: 3, cost: 0.08 },
	{ beats: 6, cost: 0.3 },
	{ beats: 2, cost: 0.6 },
	{ beats: 5, cost: 0.35 },
	{ beats: 7, cost: 0.4 },
];
/** Cost of leaving one metre for another at a bar line. */
const METRE_CHANGE = 12;

/** A division of beats into bars. */
export interface BarDivision {
	/** For each beat its place in its bar, from 0, and the beats of that bar. */
	readonly places: Uint8Array;
	readonly metres: Uint8Array;
	/** What each beat brings to the division, in the evidence's own unit. */
	readonly gains: Float64Array;
}

/** @param evidence for each beat, log-odds that it begins a bar (0: no opinion) */
export function layBars(evidence: Float64Array): BarDivision {
	const count = evidence.length;
	const sums = new Float64Array(count + 1);
	for (let k = 0; k < count; k++) sums[k + 1] = sums[k] + evidence[k];
	/** Gain of a bar of m beats from beat k on, as far as there are beats. */
	const gainOf = (k: number, m: number): number => {
		const end = Math.min(count, k + METRES[m].beats);
		return 2 * evidence[k] - (sums[end] - sums[k]) - METRES[m].cost * (end - k);
	};
	const kinds = METRES.length;
	/** best[k · kinds + m]: the best division of the beats before k whose last bar has metre m. */
	const best = new Float64Array((count + 1) * kinds).fill(Number.NEGATIVE_INFINITY);
	/** First beat of that last bar, −1 for a pickup; and the metre of the bar before it. */
	const start = new Int32Array((count + 1) * kinds).fill(-1);
	const came = new Uint8Array((count + 1) * kinds);
	for (let m = 0; m < kinds; m++) {
		for (let k = 0; k < METRES[m].beats && k <= count; k++) best[k * kinds + m] = -sums[k] - METRES[m].cost * k;
	}
	for (let k = 0; k < count; k++) {
		for (let m = 0; m < kinds; m++) {
			let most = best[k * kinds + m];
			let from = m;
			for (let other = 0; other < kinds; other++) {
				const value = best[k * kinds + other] - METRE_CHANGE;
				if (value <= most) continue;
				most = value;
				from = other;
			}
			// The last bar may be incomplete.
			const end = Math.min(count, k + METRES[m].beats);
			const value = most + gainOf(k, m);
			if (!(value > best[end * kinds + m])) continue;
			best[end * kinds + m] = value;
			start[end * kinds + m] = k;
			came[end * kinds + m] = from;
		}
	}
	let m = 0;
	for (let other = 1; other < kinds; other++) {
		if (best[count * kinds + other] > best[count * kinds + m]) m = other;
	}
	const places = new Uint8Array(count);
	const metres = new Uint8Array(count);
	for (let end = count; end > 0; ) {
		const at = end * kinds + m;
		const from = start[at];
		const pickup = from < 0;
		for (let k = Math.max(0, from); k < end; k++) {
			places[k] = pickup ? METRES[m].beats - end + k : k - from;
			metres[k] = METRES[m].beats;
		}
		if (pickup) break;
		m = came[at];
		end = from;
	}
	const costOf = (beats: number): number => METRES.find((metre) => metre.beats === beats)?.cost ?? 0;
	const gains = evidence.map((value, k) => (places[k] === 0 ? value : -value) - costOf(metres[k]));
	return { places, metres, gains };
}
