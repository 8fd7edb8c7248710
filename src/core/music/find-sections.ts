/**
 * Sections on bar lines: the division of the bars into blocks that are most alike within themselves, after Marmoret,
 * Cohen and Bimbot, "Barwise music structure analysis with the correlation block-matching segmentation algorithm"
 * (2023; convolutive block matching 2022), with Foote's novelty (2000) at the block's start added to a block's score.
 */
import type { BarLikeness } from "./describe-bars.ts";

/** Bars on either side of the diagonal that count towards a block. */
const BAND = 7;
const LONGEST = 32;
const HALF_WIDTHS = [4, 8, 16];
/** Weights of likeness, of length, of novelty, and the novelty that a boundary needs; found on rendered songs. */
const LIKENESS = 0.58;
const LENGTH = 0.59;
const NOVELTY = 0.19;
const NOVELTY_NEEDED = 0.36;

/** How unusual a section of so many bars is: people write in eights. */
function lengthPenalty(bars: number): number {
	if (bars === 8) return 0;
	if (bars % 4 === 0) return 0.1;
	return bars % 2 === 0 ? 0.4 : 1;
}

/** Foote's checkerboard along the diagonal, as the mean of its half-widths' z-scores. */
export function barNovelty({ count, values }: BarLikeness): Float64Array {
	const novelty = new Float64Array(count);
	for (const half of HALF_WIDTHS) {
		if (count < 2 * half) continue;
		const raw = new Float64Array(count);
		for (let at = 1; at < count; at++) {
			let sum = 0;
			let weight = 0;
			for (let a = -half; a < half; a++) {
				for (let b = -half; b < half; b++) {
					const i = at + a;
					const j = at + b;
					if (i < 0 || j < 0 || i >= count || j >= count) continue;
					// A Gaussian taper: what lies near the boundary says most.
					const taper = Math.exp(-((a + 0.5) ** 2 + (b + 0.5) ** 2) / (half * half));
					sum += a < 0 === b < 0 ? taper * values[i * count + j] : -taper * values[i * count + j];
					weight += taper;
				}
			}
			raw[at] = sum / Math.max(1e-9, weight);
		}
		const mean = raw.reduce((x, y) => x + y, 0) / count;
		const spread = Math.sqrt(raw.reduce((x, y) => x + (y - mean) ** 2, 0) / count) || 1;
		for (let at = 0; at < count; at++) novelty[at] += (raw[at] - mean) / spread / HALF_WIDTHS.length;
	}
	return novelty;
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
	// More detail: a boundary asks for less novelty.
	const needed = NOVELTY_NEEDED + (0.5 - detail) * 4;
	for (let end = 1; end <= count; end++) {
		for (let length = 1; length <= Math.min(LONGEST, end); length++) {
			const from = end - length;
			const like = scores[from * (LONGEST + 1) + length] * unit;
			const start = from === 0 ? 0 : NOVELTY * (novelty[from] - needed);
			const value = best[from] + (LIKENESS * like * length) / 8 - LENGTH * lengthPenalty(length) + start;
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
