/**
 * Sections on bar lines: the division of the bars into blocks that are most alike within themselves, after Marmoret,
 * Cohen and Bimbot, "Barwise music structure analysis with the correlation block-matching segmentation algorithm"
 * (2023; convolutive block matching 2022). A block's start gains by the change of what repeats there: the novelty of the
 * time-lag picture of Serrà, Müller, Grosche and Arcos, "Unsupervised music structure annotation by time series
 * structure features and segment similarity" (2014).
 */
import type { BarLikeness } from "./describe-bars.ts";

/** Bars on either side of the diagonal that count towards a block. */
const BAND = 15;
const LONGEST = 32;
/** Weights of likeness, of length and of novelty; found on rendered songs, as all figures here. */
const LIKENESS = 1.2;
const LENGTH = 0.3;
const NOVELTY = 0.1;
/** Bars over which the time-lag picture is smoothed (spread of a Gaussian). */
const SMOOTHING = 1;
/** What a boundary costs more at no detail than at full detail. */
const DETAIL = 1.2;

/** How unusual a section of so many bars is: people write in eights. */
function lengthPenalty(bars: number): number {
	if (bars === 8 || bars === 16) return 0;
	if (bars % 4 === 0) return 0.2;
	return bars % 2 === 0 ? 0.5 : 0.7;
}

/** How much the picture of what repeats changes at each bar, as a z-score. */
export function barNovelty({ count, values }: BarLikeness): Float64Array {
	const reach = Math.ceil(2 * SMOOTHING);
	const taper = Float64Array.from({ length: 2 * reach + 1 }, (_, k) => Math.exp(-0.5 * ((k - reach) / SMOOTHING) ** 2));
	const novelty = new Float64Array(count);
	// Row of bar i: likeness to the bar `lag` before it, for every lag, smoothed over neighbouring bars.
	let before = new Float64Array(2 * count);
	let now = new Float64Array(2 * count);
	for (let i = 0; i < count; i++) {
		for (let lag = 1 - count; lag < count; lag++) {
			let sum = 0;
			let weight = 0;
			for (let k = -reach; k <= reach; k++) {
				const bar = i + k;
				if (bar < 0 || bar >= count) continue;
				const other = bar - lag;
				weight += taper[k + reach];
				if (other >= 0 && other < count) sum += taper[k + reach] * values[bar * count + other];
			}
			now[lag + count] = sum / weight;
		}
		if (i > 0) {
			let change = 0;
			for (let k = 0; k < now.length; k++) change += (now[k] - before[k]) ** 2;
			novelty[i] = change;
		}
		[before, now] = [now, before];
	}
	const mean = novelty.reduce((x, y) => x + y, 0) / Math.max(1, count);
	const spread = Math.sqrt(novelty.reduce((x, y) => x + (y - mean) ** 2, 0) / Math.max(1, count)) || 1;
	return novelty.map((x) => (x - mean) / spread);
}

/** Mean likeness within the band of each block [from, from + length): index from · (LONGEST + 1) + length. */
function blockScores({ count, values }: BarLikeness): Float64Array {
	const scores = new Float64Array(count * (LONGEST + 1));
	for (let from = 0; from < count; from++) {
		let sum = 0;
		for (let length = 2; length <= LONGEST && from + length <= count; length++) {
			const last = from + length - 1;
			for (let j = Math.max(from, last - BAND); j < last; j++) sum += values[last * count + j];
			scores[from * (LONGEST + 1) + length] = (2 * sum) / length;
		}
	}
	return scores;
}

/**
 * Starts of the sections, as bar indices, the first 0.
 * @param detail 0 coarse … 1 fine, ½ as people mostly divide
 */
export function findBoundaries(likeness: BarLikeness, detail = 0.5): number[] {
	const { count } = likeness;
	if (count === 0) return [];
	const scores = blockScores(likeness);
	const novelty = barNovelty(likeness);
	// A block is measured against the most alike eight bars of this track.
	let eight = 0;
	for (let from = 0; from + 8 <= count; from++) eight = Math.max(eight, scores[from * (LONGEST + 1) + 8]);
	const unit = eight > 0 ? 1 / eight : 0;
	const best = new Float64Array(count + 1).fill(Number.NEGATIVE_INFINITY);
	const came = new Int32Array(count + 1);
	best[0] = 0;
	const cost = DETAIL * (0.5 - detail);
	for (let end = 1; end <= count; end++) {
		for (let length = 1; length <= Math.min(LONGEST, end); length++) {
			const from = end - length;
			// A last bar by itself is the end of what went before: a closing chord.
			if (end === count && length === 1 && from > 0) continue;
			const like = scores[from * (LONGEST + 1) + length] * unit;
			const start = from === 0 ? 0 : NOVELTY * novelty[from] - cost;
			const value = best[from] + LIKENESS * like - LENGTH * lengthPenalty(length) + start;
			if (value > best[end]) {
				best[end] = value;
				came[end] = from;
			}
		}
	}
	const starts: number[] = [];
	for (let end = count; end > 0; end = came[end]) starts.push(came[end]);
	return starts.reverse();
}
