import type { BeatMap, Section } from "../core/show/index.ts";

/** One line of the staves: a window of the music, in beats. Page view and strip differ in their windows alone. */
export interface RowWindow {
	/** Section id, or null where the line belongs to no section. */
	readonly section: string | null;
	/** Set large at the line's head; empty on a continuation line. */
	readonly letter: string;
	readonly name: string;
	/** Bar number at the line's head. */
	readonly bar: number;
	/** Positions, beats. */
	readonly from: number;
	readonly to: number;
}

/** Longest line of the page, in bars; longer sections go on in the next line. */
const LONGEST_LINE = 16;
/** A lead-in or an ending shorter than this many beats gets no line of its own. */
const SHORTEST_LINE = 2;

/**
 * One line a section, longer sections wrapped, music before the first and after the last section in lines of its own.
 * @param end seconds, where the soundtrack ends
 */
export function pageRows(sections: readonly Section[], beatMap: BeatMap, end: number): RowWindow[] {
	const rows: RowWindow[] = [];
	const first = beatMap.positionAt(0);
	const last = Math.max(first + SHORTEST_LINE, beatMap.positionAt(end));
	const ordered = [...sections].sort((a, b) => a.from - b.from);
	const seen = new Map<string, number>();
	let reached = first;
	const open = (from: number, to: number) => {
		if (to - from >= SHORTEST_LINE)
			rows.push(...wrap(null, "", from <= first ? "before the first bar" : "", from, to, beatMap));
	};
	for (const section of ordered) {
		open(reached, section.from);
		const times = seen.get(section.letter) ?? 0;
		seen.set(section.letter, times + 1);
		const letter = section.letter + (section.letter && times > 0 ? primes(times) : "");
		rows.push(...wrap(section.id, letter, section.name, section.from, section.to, beatMap));
		reached = Math.max(reached, section.to);
	}
	if (ordered.length === 0) return wrap(null, "", "", first < 0 && first > -8 ? 0 : first, last, beatMap);
	if (last - reached >= SHORTEST_LINE) rows.push(...wrap(null, "", "after the last bar", reached, last, beatMap));
	return rows;
}

/** A′ the second time, A″ the third, then A4. */
function primes(times: number): string {
	return times === 1 ? "′" : times === 2 ? "″" : String(times + 1);
}

function wrap(
	section: string | null,
	letter: string,
	name: string,
	from: number,
	to: number,
	beatMap: BeatMap,
): RowWindow[] {
	const rows: RowWindow[] = [];
	let start = from;
	while (to - start > 1e-6) {
		const bar = beatMap.barAt(start + 1e-6).bar;
		let stop = beatMap.positionOf(bar + LONGEST_LINE);
		if (stop >= to - 1e-6 || stop <= start) stop = to;
		// A last line of a bar or two looks lost: it is shared with the line before.
		else if (to - stop < 2.5 * beatMap.beatsPerBarAt(stop)) stop = beatMap.positionOf(bar + LONGEST_LINE / 2);
		const head = rows.length === 0;
		rows.push({
			section,
			letter: head ? letter : "",
			name: head ? name : "",
			bar,
			from: start,
			to: Math.min(stop, to),
		});
		start = stop;
	}
	return rows;
}

/** Beats that the longest line holds: all lines share one scale, so that repeats stand under each other. */
export function longestRow(rows: readonly RowWindow[]): number {
	return rows.reduce((longest, row) => Math.max(longest, row.to - row.from), 4);
}
