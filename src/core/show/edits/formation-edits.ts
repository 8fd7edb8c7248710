import type { InferInput } from "valibot";
import { StarstaveError } from "../../units/index.ts";
import { requireFormation } from "../check-references.ts";
import { find } from "../ordered.ts";
import { type Formation, formation as formationSchema } from "../schema/shape.ts";
import { slotCount } from "../slot-count.ts";
import type { DraftShow } from "./apply-edit.ts";
import { checkListed } from "./check-part.ts";
import { newId } from "./new-id.ts";

type Written = InferInput<typeof formationSchema>;
/** A formation's fields without its id; what is left out keeps its default. */
type Fields = {
	[K in keyof Written as string extends K ? never : number extends K ? never : K extends "id" ? never : K]: Written[K];
};
export type NewFormation = Fields & { readonly id?: string };

function requireOne(draft: DraftShow, id: string): Formation {
	const formation = find(draft.formations, id);
	if (formation === undefined) throw new StarstaveError("show", `The show has no formation with the id ${id}.`);
	return formation as Formation;
}

function checkFormation(written: unknown): Formation {
	const formation = checkListed(formationSchema, "formations", written);
	requireFormation(formation);
	return formation;
}

/**
 * Adds a formation; the first one becomes the opening.
 * @returns its id
 */
export function addFormation(draft: DraftShow, formation: NewFormation): string {
	const id = formation.id ?? newId("f", draft.formations.order);
	if (Object.hasOwn(draft.formations.byId, id)) {
		throw new StarstaveError("show", `A formation with the id ${id} is in the show already; a new one needs its own.`);
	}
	draft.formations.byId[id] = checkFormation({ ...formation, id });
	draft.formations.order.push(id);
	draft.opening ??= id;
	return id;
}

/**
 * Sets fields of a formation. Where its number of slots changes, colours and groups that are not set with it are cut
 * to the new slots (colours that would be missing: all are dropped, so that nothing is painted by guess).
 */
export function changeFormation(draft: DraftShow, id: string, change: Partial<Fields>): void {
	const before = requireOne(draft, id);
	const merged: Record<string, unknown> = { ...before, ...change, id };
	for (const key of Object.keys(merged)) if (merged[key] === undefined) delete merged[key];
	if (change.shape !== undefined) {
		const after = checkListed(formationSchema, "formations", { ...merged, colours: undefined, groups: undefined });
		const slots = slotCount(after.shape);
		if (change.colours === undefined && before.colours !== undefined && before.colours.length !== slots) {
			if (before.colours.length > slots) merged.colours = before.colours.slice(0, slots);
			else delete merged.colours;
		}
		if (change.groups === undefined && before.groups !== undefined) {
			merged.groups = Object.fromEntries(
				Object.entries(before.groups).map(([name, indices]) => [name, indices.filter((index) => index < slots)]),
			);
		}
	}
	draft.formations.byId[id] = checkFormation(merged);
}

/**
 * Takes a formation out.
 * @throws StarstaveError where a cue still goes to it, or the fleet waits in it
 */
export function removeFormation(draft: DraftShow, id: string): void {
	const formation = requireOne(draft, id);
	const name = formation.name === "" ? id : `${formation.name} (id ${id})`;
	for (const cueId of draft.cues.order) {
		const cue = draft.cues.byId[cueId];
		if (cue.kind === "transition" && cue.formation === id) {
			throw new StarstaveError("show", `Cue ${cue.number} goes to formation ${name}; send it elsewhere first.`);
		}
	}
	if (draft.opening === id) {
		if (draft.formations.order.length > 1) {
			throw new StarstaveError("show", `Formation ${name} is the opening; choose another opening first.`);
		}
		draft.opening = null;
	}
	delete draft.formations.byId[id];
	draft.formations.order = draft.formations.order.filter((other) => other !== id);
}

/** A copy under a new id, named after the original. */
export function copyFormation(draft: DraftShow, id: string, name?: string): string {
	const { id: _id, ...rest } = requireOne(draft, id);
	return addFormation(draft, { ...rest, name: name ?? rest.name });
}
