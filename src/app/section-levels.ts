import type { Analysis } from "../core/music/index.ts";
import { type BeatMap, createBeatMap, newId, type Section, type Show } from "../core/show/index.ts";

/** Beats within which a border of the show is one that was heard: its bar line may have been moved since. */
const SAME = 0.51;

/** Borders of one level in beats of the show's own grid: on bar lines, without the start of the first section. */
function bordersAt(analysis: Analysis, level: number, beatMap: BeatMap): number[] {
	const places = analysis.sectionLevels[level].slice(1).map(({ start }) => {
		const { bar, beat } = beatMap.barAt(Math.round(beatMap.positionAt(start)));
		return beatMap.positionOf(beat > 2 ? bar + 1 : bar);
	});
	return [...new Set(places)];
}

/** Which level the show's sections are nearest to, 0 for the coarsest; null where there is nothing to compare with. */
export function levelOf(analysis: Analysis, show: Show): number | null {
	if (analysis.sectionLevels.every((sections) => sections.length === 0)) return null;
	const beatMap = createBeatMap(show.grid);
	const own = show.sections.slice(1).map(({ from }) => from);
	let best = 0;
	let least = Infinity;
	analysis.sectionLevels.forEach((_, level) => {
		const heard = bordersAt(analysis, level, beatMap);
		const missing = heard.filter((at) => !own.some((other) => Math.abs(other - at) < SAME)).length;
		const extra = own.filter((at) => !heard.some((other) => Math.abs(other - at) < SAME)).length;
		// Of levels that say the same the middle one is where the analysis began.
		const off = missing + extra + Math.abs(level - 2) * 1e-3;
		if (off < least) [best, least] = [level, off];
	});
	return best;
}

/**
 * The show's sections at another level of detail, without a new analysis. Borders that were never heard at any level were
 * set by hand and stay; a section that begins where one began before keeps its id, name and letter.
 */
export function sectionsAt(analysis: Analysis, level: number, show: Show): Section[] {
	const beatMap = createBeatMap(show.grid);
	const heard = analysis.sectionLevels[level];
	const everHeard = analysis.sectionLevels.flatMap((_, k) => bordersAt(analysis, k, beatMap));
	const byHand = show.sections
		.slice(1)
		.map(({ from }) => from)
		.filter((at) => !everHeard.some((other) => Math.abs(other - at) < SAME));
	const first = show.sections[0]?.from ?? 0;
	const last = show.sections.at(-1)?.to ?? show.grid.beats.length;
	const borders = [...new Set([first, ...bordersAt(analysis, level, beatMap), ...byHand])]
		.filter((at) => at >= first && at < last)
		.sort((a, b) => a - b);
	const used: string[] = [];
	return borders.map((from, index) => {
		const to = borders[index + 1] ?? last;
		const before = show.sections.find((section) => Math.abs(section.from - from) < SAME);
		const middle = beatMap.secondsAt(from + 0.01);
		const letter = before?.letter ?? heard.findLast(({ start }) => start <= middle + 0.05)?.letter ?? "";
		const id =
			before !== undefined && !used.includes(before.id)
				? before.id
				: newId("s", [...used, ...show.sections.map((one) => one.id)]);
		used.push(id);
		return { id, name: before?.name ?? "", letter, from, to };
	});
}
