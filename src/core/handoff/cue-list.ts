import type { ShowCheck, TransitionCheck } from "../flight/index.ts";
import {
	type BeatMap,
	type Cue,
	createBeatMap,
	cuePosition,
	cuesInTime,
	cueTimes,
	find,
	type Paint,
	type Show,
} from "../show/index.ts";
import { type Cell, writeCsv } from "./csv.ts";
import { type Timecode, timecodeAt } from "./timecode.ts";

/** One line of the cue list: what the crew runs from. Seconds from the soundtrack's first sample; bar and beat from 1. */
export interface CueLine {
	readonly id: string;
	readonly number: string;
	readonly kind: Cue["kind"];
	readonly called: boolean;
	readonly name: string;
	/** Name of the section it starts in, or empty. */
	readonly section: string;
	readonly bar: number;
	readonly beat: number;
	readonly start: number;
	readonly end: number;
	readonly startTimecode: string;
	readonly endTimecode: string;
	readonly group: string;
	/** What it sets, in words. */
	readonly values: string;
	/** Of a transition: what it breaks or that it flies; seconds in hand. Null for the other kinds. */
	readonly verdict: string | null;
	readonly slack: number | null;
	readonly note: string;
}

/** Seconds and beats leave to the microsecond and the thousandth: finer than any frame, coarser than a float's last bit. */
export function rounded(value: number, digits: number): number {
	const scale = 10 ** digits;
	const near = Math.round(value * scale) / scale;
	return near === 0 ? 0 : near;
}

function paintWords(paint: Paint): string {
	const { kind, ...rest } = paint;
	const values = Object.entries(rest).map(([key, value]) => {
		const text = Array.isArray(value) ? value.join(" ") : String(value);
		return key === "colour" ? text : `${key} ${text}`;
	});
	return [kind, ...values].join(" ");
}

function beatsWords(beats: number): string {
	return `${rounded(beats, 3)} ${rounded(beats, 3) === 1 ? "beat" : "beats"}`;
}

/** What a cue sets, in one line of words. */
export function cueValues(cue: Cue, show: Pick<Show, "formations">): string {
	switch (cue.kind) {
		case "transition": {
			const to = find(show.formations, cue.formation);
			const name = to === undefined || to.name === "" ? cue.formation : to.name;
			return `to ${name}, ${cue.timeLaw}, light ${cue.light}`;
		}
		case "colour":
			return cue.fade > 0 ? `${paintWords(cue.paint)}, fade ${beatsWords(cue.fade)}` : paintWords(cue.paint);
		case "intensity": {
			const level =
				typeof cue.level === "number"
					? `${rounded(100 * cue.level, 1)} %`
					: `follows ${cue.level.follow} from ${rounded(100 * cue.level.from, 1)} % to ${rounded(100 * cue.level.to, 1)} %`;
			return cue.fade > 0 ? `${level}, fade ${beatsWords(cue.fade)}` : level;
		}
	}
}

function sectionAt(show: Pick<Show, "sections">, position: number): string {
	const held = show.sections.find((section) => section.from <= position && position < section.to);
	if (held === undefined) return "";
	return held.name !== "" ? held.name : held.letter;
}

function lineOf(cue: Cue, show: Show, beatMap: BeatMap, timecode: Timecode, checked?: TransitionCheck): CueLine {
	const position = rounded(cuePosition(cue, beatMap), 6);
	const { bar, beat } = beatMap.barAt(position);
	const { start, end } = cueTimes(cue, beatMap);
	return {
		id: cue.id,
		number: cue.number,
		kind: cue.kind,
		called: cue.called,
		name: cue.name,
		section: sectionAt(show, position),
		bar,
		beat: rounded(beat, 3),
		start: rounded(start, 6),
		end: rounded(end, 6),
		startTimecode: timecodeAt(start, timecode),
		endTimecode: timecodeAt(end, timecode),
		group: cue.group,
		values: cueValues(cue, show),
		verdict: checked === undefined ? null : checked.verdicts.join(" "),
		slack: checked === undefined || checked.slack === null ? null : rounded(checked.slack, 3),
		note: cue.note,
	};
}

/** The cue list in the order of time. */
export function listCues(show: Show, check: ShowCheck, timecode: Timecode): CueLine[] {
	const beatMap = createBeatMap(show.grid);
	const checks = new Map(check.transitions.map((transition) => [transition.id, transition]));
	return cuesInTime(show, beatMap).map((cue) => lineOf(cue, show, beatMap, timecode, checks.get(cue.id)));
}

const COLUMNS: readonly [string, (line: CueLine) => Cell][] = [
	["number", (line) => line.number],
	["kind", (line) => line.kind],
	["called", (line) => line.called],
	["name", (line) => line.name],
	["section", (line) => line.section],
	["bar", (line) => line.bar],
	["beat", (line) => line.beat],
	["start_s", (line) => line.start],
	["end_s", (line) => line.end],
	["start_timecode", (line) => line.startTimecode],
	["end_timecode", (line) => line.endTimecode],
	["group", (line) => line.group],
	["values", (line) => line.values],
	["verdict", (line) => line.verdict],
	["slack_s", (line) => line.slack],
	["note", (line) => line.note],
];

/** `cue-list.csv`: one line a cue, its revision code at the end of each. */
export function cueListCsv(lines: readonly CueLine[], revision: string): string {
	return writeCsv(
		[...COLUMNS.map(([name]) => name), "revision"],
		lines.map((line) => [...COLUMNS.map(([, cell]) => cell(line)), revision]),
	);
}

/** `cue-list.json`: the same lines with the cue as the show holds it, for programs. */
export function cueListJson(lines: readonly CueLine[], show: Show, revision: string, timecode: Timecode): string {
	const cues = lines.map(({ values, ...line }) => ({ ...line, values, cue: show.cues.byId[line.id] }));
	const list = { format: "starstave-cue-list", version: 1, title: show.title, revision, timecode, cues };
	return `${JSON.stringify(list, null, "\t")}\n`;
}
