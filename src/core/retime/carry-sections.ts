/** Sections carried over: each keeps the parts of it that are in the new edit; what was put in becomes new ones. */
import type { BeatMap, Section } from "../show/index.ts";
import { type EditMap, isCarried, newTimeIn } from "./edit-map.ts";

/** What the sections need of an analysis of the new soundtrack, in seconds. */
export interface HeardSection {
	readonly start: number;
	readonly end: number;
}

/** Beats: shorter parts are the ragged edge of a cut, and positions this close to a beat are on it. */
const LEAST = 1;
const ON_BEAT = 0.12;
/** Seconds: what was put in is a section from this length on. */
const LEAST_NEW = 2;

export function carrySections(
	sections: readonly Section[],
	map: EditMap,
	oldBeats: BeatMap,
	newBeats: BeatMap,
	heard: readonly HeardSection[] = [],
): Section[] {
	interface Part {
		readonly from: number;
		readonly to: number;
		readonly source: Section | null;
		/** Old seconds. */
		readonly oldFrom: number;
		readonly oldTo: number;
	}
	const parts: Part[] = [];
	const position = (seconds: number): number => {
		const exact = newBeats.positionAt(seconds);
		// Adding 0 turns −0 into 0: a file has no −0, and equal shows must give equal files.
		const nearest = Math.round(exact) + 0;
		return Math.abs(exact - nearest) <= ON_BEAT ? nearest : exact;
	};
	for (const stretch of map.stretches) {
		if (isCarried(stretch)) {
			for (const section of sections) {
				const from = Math.max(stretch.old[0], oldBeats.secondsAt(section.from));
				// The last section may end past the sound, with the grid.
				const end = oldBeats.secondsAt(section.to);
				const to = map.oldDuration - stretch.old[1] < 0.05 ? end : Math.min(stretch.old[1], end);
				if (to <= from) continue;
				const [start, stop] = [position(newTimeIn(stretch, from)), position(newTimeIn(stretch, to))];
				parts.push({ from: start, to: stop, source: section, oldFrom: from, oldTo: to });
			}
		} else if (stretch.kind === "inserted" && sections.length > 0 && stretch.new[1] - stretch.new[0] >= LEAST_NEW) {
			const inside = heard
				.map(({ start, end }) => ({ start: Math.max(start, stretch.new[0]), end: Math.min(end, stretch.new[1]) }))
				.filter(({ start, end }) => end - start >= LEAST_NEW);
			const ranges = inside.length > 0 ? inside : [{ start: stretch.new[0], end: stretch.new[1] }];
			for (const { start, end } of ranges) {
				parts.push({ from: position(start), to: position(end), source: null, oldFrom: 0, oldTo: 0 });
			}
		}
	}
	const joined: Part[] = [];
	for (const part of parts) {
		const last = joined[joined.length - 1];
		const from = last === undefined ? part.from : Math.max(part.from, last.to);
		if (part.to - from < LEAST) continue;
		// A section that was shortened within is still one; one that is heard twice in a row is two.
		const goesOn =
			last !== undefined &&
			last.source !== null &&
			last.source === part.source &&
			from - last.to < ON_BEAT &&
			part.oldFrom >= last.oldTo - 0.05;
		if (goesOn) joined[joined.length - 1] = { ...last, to: part.to, oldTo: part.oldTo };
		else joined.push({ ...part, from });
	}
	const used = new Set<string>(sections.map((section) => section.id));
	const taken = new Set<string>();
	return joined.map(({ from, to, source }) => {
		const wanted = source?.id ?? "new";
		let id = wanted;
		for (let n = 2; taken.has(id) || (id !== source?.id && used.has(id)); n++) id = `${wanted}-${n}`;
		taken.add(id);
		return source === null ? { id, name: "New music", letter: "", from, to } : { ...source, id, from, to };
	});
}
