import { StarstaveError } from "../units/index.ts";
import { cueTimes } from "./cue-times.ts";
import { createBeatMap } from "./grid.ts";
import type { Cue } from "./schema/cue.ts";
import { capitalise, describePlace } from "./schema/describe-issue.ts";
import type { Formation } from "./schema/shape.ts";
import type { Bar, DroneGroup, Section, ShowFile } from "./schema/show-file.ts";
import { slotCount } from "./slot-count.ts";

/**
 * What the schema can't see because it takes two places to know: order, references, counts. Each function throws a
 * StarstaveError of one sentence. They run on files and, one at a time, inside the edits.
 */

/** Seconds before the music, and past its end, in which a cue may stand. */
export const EARLIEST = -600;
export const LATEST_PAST_END = 600;

function refuse(sentence: string): never {
	throw new StarstaveError("show", capitalise(sentence));
}

export function requireUniqueIds(kind: string, ids: readonly string[]): void {
	const seen = new Map<string, number>();
	ids.forEach((id, index) => {
		const before = seen.get(id);
		if (before !== undefined) {
			refuse(
				`${kind} ${index + 1} of the list has the id ${id} that ${kind} ${before + 1} has; every ${kind} needs its own.`,
			);
		}
		seen.set(id, index);
	});
}

/** Beats strictly rising; bars rising, each on a beat of the grid. */
export function requireGrid(beats: readonly number[], bars: readonly Bar[]): void {
	for (let i = 0; i < beats.length; i++) {
		if (!Number.isFinite(beats[i])) refuse(`beat ${i} of the grid is ${beats[i]} s, but must be a finite number.`);
		if (i > 0 && beats[i] <= beats[i - 1]) {
			refuse(`beat ${i} of the grid stands at ${beats[i]} s, but must come after beat ${i - 1} at ${beats[i - 1]} s.`);
		}
	}
	for (let i = 0; i < bars.length; i++) {
		const { beat } = bars[i];
		if (beat >= beats.length) {
			refuse(
				`bar ${i + 1} of the grid starts on beat ${beat}, but the grid has ${beats.length} beats, counted from 0.`,
			);
		}
		if (i > 0 && beat <= bars[i - 1].beat) {
			refuse(
				`bar ${i + 1} of the grid starts on beat ${beat}, but must come after bar ${i} on beat ${bars[i - 1].beat}.`,
			);
		}
	}
}

export function requireSections(sections: readonly Section[]): void {
	requireUniqueIds(
		"section",
		sections.map(({ id }) => id),
	);
	sections.forEach((section, i) => {
		const name = describePlace({ sections }, ["sections", i]);
		if (section.to <= section.from) {
			refuse(`${name} runs from beat ${section.from} to beat ${section.to}, but must end after it starts.`);
		}
		if (i > 0 && section.from < sections[i - 1].to) {
			const before = describePlace({ sections }, ["sections", i - 1]);
			refuse(`${name} starts on beat ${section.from}, but ${before} only ends on beat ${sections[i - 1].to}.`);
		}
	});
}

/** Colours one a slot, groups within the slots, no group that takes the name `all`. */
export function requireFormation(formation: Formation): void {
	const name = describePlace({ formations: [formation] }, ["formations", 0]);
	const slots = slotCount(formation.shape);
	const colours = formation.colours;
	if (colours !== undefined && colours.length !== slots) {
		refuse(`${name} has ${colours.length} colours for ${slots} slots; it needs one for each slot, or none.`);
	}
	for (const [group, indices] of Object.entries(formation.groups ?? {})) {
		if (group === "all")
			refuse(`${name} has a group named all, but all always means every slot; give it another name.`);
		for (const index of indices) {
			if (index < slots) continue;
			refuse(`${name}: group ${group} names slot ${index}, but its ${slots} slots count from 0 to ${slots - 1}.`);
		}
	}
}

export function requireDroneGroup(group: DroneGroup, drones: number): void {
	for (const drone of group.drones) {
		if (drone < drones) continue;
		refuse(
			`group ${group.name} (id ${group.id}) names drone ${drone}, but the fleet has ${drones} drones, counted from 0.`,
		);
	}
}

/** What a cue needs to know of the show that it stands in. */
export interface CueSurroundings {
	readonly formations: readonly string[];
	readonly beats: readonly number[];
	readonly bars: readonly Bar[];
	/** Seconds: end of the soundtrack, or null without one. */
	readonly duration: number | null;
}

/** Known formations, times within ten minutes of the music. */
export function requireCues(cues: readonly Cue[], around: CueSurroundings): void {
	const known = new Set(around.formations);
	const beatMap = createBeatMap(around);
	const lastBeat = around.beats.length > 0 ? around.beats[around.beats.length - 1] : 0;
	cues.forEach((cue, i) => {
		const name = (): string => describePlace({ cues }, ["cues", i]);
		if (cue.kind === "transition" && !known.has(cue.formation)) {
			refuse(`${name()} goes to formation ${cue.formation}, but the show has ${listIds(around.formations)}.`);
		}
		const { start, end } = cueTimes(cue, beatMap);
		if (start < EARLIEST) refuse(`${name()} starts at ${start} s, but must start at ${EARLIEST} s or later.`);
		if (around.duration !== null && end > around.duration + LATEST_PAST_END) {
			const latest = around.duration + LATEST_PAST_END;
			refuse(
				`${name()} ends at ${end} s, but must end by ${latest} s, ${LATEST_PAST_END} s past the soundtrack's end.`,
			);
		}
		// Without a soundtrack the last cue itself is the end, so only a place no show reaches is refused.
		if (around.duration === null && end > lastBeat + 86400) {
			refuse(`${name()} ends at ${end} s, but must end within a day of the last beat at ${lastBeat} s.`);
		}
	});
}

function listIds(ids: readonly string[]): string {
	if (ids.length === 0) return "no formations";
	const shown = ids.slice(0, 5).join(", ");
	return ids.length > 5 ? `only ${shown} and ${ids.length - 5} more` : `only ${shown}`;
}

export function requireOpening(opening: string | null, formations: readonly string[]): void {
	if (opening === null || formations.includes(opening)) return;
	refuse(`opening is formation ${opening}, but the show has ${listIds(formations)}.`);
}

/** Every check of a whole file, in the order of the file. */
export function requireReferences(file: ShowFile): void {
	const formations = file.formations.map(({ id }) => id);
	requireGrid(file.grid.beats, file.grid.bars);
	requireSections(file.sections);
	requireUniqueIds("formation", formations);
	requireOpening(file.opening, formations);
	for (const formation of file.formations) requireFormation(formation);
	requireUniqueIds(
		"group",
		file.groups.map(({ id }) => id),
	);
	for (const group of file.groups) requireDroneGroup(group, file.fleet.count);
	requireUniqueIds(
		"cue",
		file.cues.map(({ id }) => id),
	);
	requireCues(file.cues, { formations, ...file.grid, duration: file.soundtrack?.duration ?? null });
}
