import type { InferInput } from "valibot";
import { StarstaveError } from "../../units/index.ts";
import { numberBetween } from "../cue-number.ts";
import { cuesInTime, cueTimes } from "../cue-times.ts";
import { createBeatMap } from "../grid.ts";
import { find } from "../ordered.ts";
import { type Cue, cue as cueSchema } from "../schema/cue.ts";
import type { DraftShow } from "./apply-edit.ts";
import { checkCuesIn, checkListed } from "./check-part.ts";
import { newId } from "./new-id.ts";

type Written = InferInput<typeof cueSchema>;
/** The fields that the schema knows, without the door left open for unknown keys, and without those named. */
type Fields<T, Without extends string> = {
	[K in keyof T as string extends K ? never : number extends K ? never : K extends Without ? never : K]: T[K];
};
type Named = { readonly id?: string; readonly number?: string };
/** A cue that is put in: without an id or a number it gets its own; every default may be left out. */
export type NewCue = Written extends infer C ? (C extends Written ? Fields<C, "id" | "number"> & Named : never) : never;
/** Fields of a cue that an edit may set; id, number and kind stay what they are. */
export type CueChange = Partial<
	Fields<Extract<Written, { kind: "transition" }>, "id" | "number" | "kind"> &
		Fields<Extract<Written, { kind: "colour" }>, "id" | "number" | "kind"> &
		Fields<Extract<Written, { kind: "intensity" }>, "id" | "number" | "kind">
>;

function requireCue(draft: DraftShow, id: string): Cue {
	const cue = find(draft.cues, id);
	if (cue === undefined) throw new StarstaveError("show", `The show has no cue with the id ${id}.`);
	return cue as Cue;
}

function checkCue(draft: DraftShow, written: unknown): Cue {
	const cue = checkListed(cueSchema, "cues", written);
	checkCuesIn(draft, [cue]);
	return cue;
}

/**
 * Puts a cue in, numbered between its neighbours in time.
 * @returns its id
 * @throws StarstaveError an id or number that another cue has; a field out of its range; an unknown formation
 */
export function addCue(draft: DraftShow, cue: NewCue): string {
	const id = cue.id ?? newId("c", draft.cues.order);
	if (Object.hasOwn(draft.cues.byId, id)) {
		throw new StarstaveError("show", `A cue with the id ${id} is in the show already; a new cue needs its own.`);
	}
	const numbers = draft.cues.order.map((other) => draft.cues.byId[other].number);
	if (cue.number !== undefined && numbers.includes(cue.number)) {
		throw new StarstaveError("show", `Cue ${cue.number} is in the show already; a new cue needs its own number.`);
	}
	if (!Number.isFinite(cue.at))
		throw new StarstaveError("show", `A new cue is put at beat ${cue.at}, but at must be a finite number.`);
	const next = checkCue(draft, { ...cue, id, number: cue.number ?? freeNumber(draft, cue, numbers) });
	draft.cues.byId[id] = next;
	draft.cues.order.push(id);
	return id;
}

function freeNumber(
	draft: DraftShow,
	cue: { readonly at: number; readonly pinned?: number | undefined },
	numbers: readonly string[],
): string {
	const beatMap = createBeatMap(draft.grid);
	const { start } = cueTimes({ at: cue.at, length: 0, pinned: cue.pinned }, beatMap);
	let before: string | null = null;
	let after: string | null = null;
	for (const other of cuesInTime(draft, beatMap)) {
		if (cueTimes(other, beatMap).start <= start) before = other.number;
		else {
			after = other.number;
			break;
		}
	}
	return numberBetween(before, after, numbers);
}

/**
 * Sets fields of one cue. A field set to undefined goes back to its default; `pinned: undefined` lets go of the pin.
 * @throws StarstaveError a field out of its range, an unknown formation, a change of number, id or kind
 */
export function changeCue(draft: DraftShow, id: string, change: CueChange): void {
	const cue = requireCue(draft, id);
	for (const fixed of ["id", "number", "kind"] as const) {
		if (Object.hasOwn(change, fixed) && (change as Record<string, unknown>)[fixed] !== cue[fixed]) {
			throw new StarstaveError("show", `Cue ${cue.number} keeps its ${fixed}; remove it and add another.`);
		}
	}
	const merged: Record<string, unknown> = { ...cue, ...change };
	for (const key of Object.keys(merged)) if (merged[key] === undefined) delete merged[key];
	draft.cues.byId[id] = checkCue(draft, merged);
}

/** Gives a cue another number, where nothing has gone out yet. */
export function renumberCue(draft: DraftShow, id: string, number: string): void {
	requireCue(draft, id);
	const other = draft.cues.order.find((one) => one !== id && draft.cues.byId[one].number === number);
	if (other !== undefined) {
		throw new StarstaveError(
			"show",
			`Cue ${number} is in the show already (id ${other}); choose a number that is free.`,
		);
	}
	draft.cues.byId[id] = checkCue(draft, { ...requireCue(draft, id), number });
}

/** Moves cues by so many beats; pinned ones by the same stretch of time from where they stand. */
export function moveCues(draft: DraftShow, ids: readonly string[], beats: number): void {
	const beatMap = createBeatMap(draft.grid);
	for (const id of ids) {
		const cue = requireCue(draft, id);
		const pinned = cue.pinned === undefined ? undefined : beatMap.secondsAt(beatMap.positionAt(cue.pinned) + beats);
		changeCue(draft, id, pinned === undefined ? { at: cue.at + beats } : { at: cue.at + beats, pinned });
	}
}

/** Moves one cue to a position. */
export function moveCue(draft: DraftShow, id: string, at: number): void {
	const cue = requireCue(draft, id);
	changeCue(draft, id, cue.pinned === undefined ? { at } : { at, pinned: createBeatMap(draft.grid).secondsAt(at) });
}

export function removeCues(draft: DraftShow, ids: readonly string[]): void {
	for (const id of ids) {
		requireCue(draft, id);
		delete draft.cues.byId[id];
	}
	const gone = new Set(ids);
	draft.cues.order = draft.cues.order.filter((id) => !gone.has(id));
}

/**
 * Copies cues so that the earliest stands at `at`, with new ids and numbers.
 * @returns the copies' ids, in the order of `ids`
 */
export function copyCues(draft: DraftShow, ids: readonly string[], at: number): string[] {
	const cues = ids.map((id) => requireCue(draft, id));
	const earliest = Math.min(...cues.map((cue) => cue.at));
	return cues.map((cue) => {
		const { id: _id, number: _number, pinned: _pinned, ...rest } = cue;
		return addCue(draft, { ...rest, at: cue.at - earliest + at } as NewCue);
	});
}

/** Replaces every cue at once: what a rough cut does. */
export function setCues(draft: DraftShow, cues: readonly Cue[]): void {
	const byId: DraftShow["cues"]["byId"] = {};
	const order: string[] = [];
	for (const cue of cues) {
		if (Object.hasOwn(byId, cue.id)) {
			throw new StarstaveError("show", `Two cues have the id ${cue.id}; every cue needs its own.`);
		}
		byId[cue.id] = checkCue(draft, cue);
		order.push(cue.id);
	}
	draft.cues = { byId, order };
}
