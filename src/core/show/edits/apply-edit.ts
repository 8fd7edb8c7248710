import { applyPatches, type Draft, enablePatches, type Patch, produceWithPatches } from "immer";
import type { Show } from "../show.ts";

enablePatches();

/** The show while an edit works on it. */
export type DraftShow = Draft<Show>;

/** What an edit did: the show after it, and the patches that do it again or undo it. */
export interface EditResult {
	readonly show: Show;
	readonly patches: readonly Patch[];
	readonly inverse: readonly Patch[];
}

/**
 * Runs one or several named edits as one step of undo. Where an edit throws, the show stays as it was.
 * @param recipe calls edits on the draft: `applyEdit(show, (draft) => setTitle(draft, "Finale"))`
 */
export function applyEdit(show: Show, recipe: (draft: DraftShow) => unknown): EditResult {
	const [next, patches, inverse] = produceWithPatches(show, (draft: DraftShow) => {
		// An edit may answer with an id; immer would take that for the new show.
		recipe(draft);
	});
	return { show: next, patches, inverse };
}

/** Carries patches over to a show: the `inverse` of an edit undoes it, its `patches` do it again. */
export function patchShow(show: Show, patches: readonly Patch[]): Show {
	return applyPatches(show, [...patches]);
}
