/** Letters: sections with the same music get the same one, in order of first appearance (A B A B C B). */
import type { BarLikeness } from "./describe-bars.ts";

/** Mean likeness along the best diagonal from which two sections count as the same music. */
const SAME = 0.5;
/** Share of the shorter section that a diagonal must cover: same music, other length, is allowed. */
const COVER = 0.75;

/** Best mean likeness along a diagonal of the sections' cross-likeness: one slid along the other. */
function bestDiagonal(
	{ count, values }: BarLikeness,
	a: readonly [number, number],
	b: readonly [number, number],
): number {
	const lengthA = a[1] - a[0];
	const lengthB = b[1] - b[0];
	const least = Math.max(1, Math.ceil(COVER * Math.min(lengthA, lengthB)));
	let best = 0;
	for (let shift = -lengthA + least; shift <= lengthB - least; shift++) {
		const from = Math.max(0, -shift);
		const to = Math.min(lengthA, lengthB - shift);
		if (to - from < least) continue;
		let sum = 0;
		for (let i = from; i < to; i++) sum += values[(a[0] + i) * count + b[0] + i + shift];
		best = Math.max(best, sum / (to - from));
	}
	return best;
}

/** 0 → A, 25 → Z, 26 → AA. */
export function letterOf(index: number): string {
	let letters = "";
	for (let rest = index; rest >= 0; rest = Math.floor(rest / 26) - 1) {
		letters = String.fromCharCode(65 + (rest % 26)) + letters;
	}
	return letters;
}

/**
 * @param starts bar index of each section's start, rising, the first 0
 * @returns a letter for each section
 */
export function nameSections(likeness: BarLikeness, starts: readonly number[]): string[] {
	const spans = starts.map((from, i) => [from, starts[i + 1] ?? likeness.count] as const);
	const alike = spans.map((a) => spans.map((b) => bestDiagonal(likeness, a, b)));
	// Groups join while the mean likeness between their members is enough, the most alike first.
	const groups = spans.map((_, i) => [i]);
	for (;;) {
		let best = SAME;
		let pair: readonly [number, number] | null = null;
		for (let g = 0; g < groups.length; g++) {
			for (let h = g + 1; h < groups.length; h++) {
				let sum = 0;
				for (const i of groups[g]) for (const j of groups[h]) sum += alike[i][j];
				const mean = sum / (groups[g].length * groups[h].length);
				if (mean > best) {
					best = mean;
					pair = [g, h];
				}
			}
		}
		if (!pair) break;
		groups[pair[0]].push(...groups[pair[1]]);
		groups.splice(pair[1], 1);
	}
	const letters = new Array<string>(spans.length).fill("");
	groups
		.map((group) => group.sort((a, b) => a - b))
		.sort((a, b) => a[0] - b[0])
		.forEach((group, index) => {
			for (const i of group) letters[i] = letterOf(index);
		});
	return letters;
}
