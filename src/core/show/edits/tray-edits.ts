import { StarstaveError } from "../../units/index.ts";
import { cueTimes } from "../cue-times.ts";
import { createBeatMap } from "../grid.ts";
import { find } from "../ordered.ts";
import type { DraftShow } from "./apply-edit.ts";
import { addCue, removeCues } from "./cue-edits.ts";

/**
 * Takes a cue out of the show and keeps it in the tray.
 * @throws StarstaveError where the show has no such cue
 */
export function putInTray(draft: DraftShow, id: string): void {
	const cue = find(draft.cues, id);
	if (cue === undefined) throw new StarstaveError("show", `The show has no cue with the id ${id}.`);
	const { start } = cueTimes(cue, createBeatMap(draft.grid));
	const waiting = { cue: structuredCue(cue), time: start, soundtrack: draft.soundtrack?.sha256 ?? "" };
	draft.orphans = [...(draft.orphans ?? []), waiting];
	removeCues(draft, [id]);
	doneReviewing(draft, id);
}

/**
 * A cue leaves the tray and stands at `at` beats, under its own number where that is still free.
 * @returns its id
 * @throws StarstaveError where the tray has no such place, or the cue's formation is no longer in the show
 */
export function putBack(draft: DraftShow, index: number, at: number): string {
	const tray = draft.orphans ?? [];
	if (tray[index] === undefined) {
		throw new StarstaveError("show", `The tray holds ${tray.length} cues, so there is no cue ${index + 1} in it.`);
	}
	const { id, number, pinned: _pinned, ...rest } = structuredCue(tray[index].cue);
	const taken = draft.cues.order.some((other) => draft.cues.byId[other].number === number);
	const own = {
		...(find(draft.cues, id) === undefined ? { id } : {}),
		...(taken ? {} : { number }),
	};
	const put = addCue(draft, { ...rest, ...own, at } as Parameters<typeof addCue>[1]);
	const left = tray.filter((_, k) => k !== index);
	if (left.length > 0) draft.orphans = left;
	else delete draft.orphans;
	return put;
}

/** A cue has been looked at. */
export function doneReviewing(draft: DraftShow, id: string): void {
	const left = (draft.review ?? []).filter((one) => one.cue !== id);
	if (left.length > 0) draft.review = left;
	else delete draft.review;
}

/** Plain data, out of the draft's hands. */
function structuredCue<T>(cue: T): T {
	return JSON.parse(JSON.stringify(cue)) as T;
}
