import type { RetimeResult } from "../retime/index.ts";
import { type BeatMap, createBeatMap, find, type Show } from "../show/index.ts";
import { type Cell, writeCsv } from "./csv.ts";

const HEADER = [
	"cue",
	"kind",
	"name",
	"old_seconds",
	"old_bar",
	"old_beat",
	"new_seconds",
	"new_bar",
	"new_beat",
	"moved_by_seconds",
	"status",
	"reason",
];

/** Every cue of a retime, as CSV: seconds with six decimals, bars and beats from 1. @param show the old one */
export function retimeCsv(show: Show, { show: next, cues }: RetimeResult): string {
	const [old, current] = [createBeatMap(show.grid), createBeatMap(next.grid)];
	const rows = cues.map((move): Cell[] => [
		move.number,
		move.kind,
		find(show.cues, move.id)?.name ?? "",
		seconds(move.oldTime),
		...place(old, move.oldPosition),
		move.newTime === null ? null : seconds(move.newTime),
		...(move.newPosition === null ? [null, null] : place(current, move.newPosition)),
		move.newTime === null ? null : seconds(move.newTime - move.oldTime),
		move.status === "orphan" ? "in the tray" : move.status,
		move.reason,
	]);
	return writeCsv(HEADER, rows);
}

const seconds = (value: number): number => Math.round(value * 1e6) / 1e6;

function place(beatMap: BeatMap, position: number): [bar: number, beat: number] {
	const { bar, beat } = beatMap.barAt(Math.round(position * 1000) / 1000);
	return [bar, Math.round(beat * 1000) / 1000];
}
