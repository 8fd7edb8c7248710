import * as v from "valibot";
import { StarstaveError } from "../../units/index.ts";
import { requireCues } from "../check-references.ts";
import type { Cue } from "../schema/cue.ts";
import { describeIssue } from "../schema/describe-issue.ts";
import type { DraftShow } from "./apply-edit.ts";

/**
 * Holds one part of the show against its schema, inside an edit.
 * @param list the list of the file that the part stands in, so that the sentence names it as the file's would
 * @throws StarstaveError one sentence: which field, what it was set to, what would be right
 */
export function checkListed<S extends v.GenericSchema>(
	schema: S,
	list: "cues" | "formations" | "sections" | "groups",
	part: unknown,
): v.InferOutput<S> {
	const result = v.safeParse(schema, part, { abortEarly: true, abortPipeEarly: true });
	if (result.success) return result.output;
	// The same sentence as for a file that holds this part alone: put the part's path under its list.
	const wrapped = v.safeParse(v.looseObject({ [list]: v.array(schema) }), { [list]: [part] }, { abortEarly: true });
	const issue = wrapped.success ? result.issues[0] : wrapped.issues[0];
	throw new StarstaveError("show", describeIssue({ [list]: [part] }, issue));
}

/** Likewise for a part that stands under a key of its own: fleet, venue, soundtrack, takeoff. */
export function checkKeyed<S extends v.GenericSchema>(schema: S, key: string, part: unknown): v.InferOutput<S> {
	const result = v.safeParse(v.looseObject({ [key]: schema }), { [key]: part }, { abortEarly: true });
	if (!result.success) throw new StarstaveError("show", describeIssue({ [key]: part }, result.issues[0]));
	return (result.output as Record<string, v.InferOutput<S>>)[key];
}

/**
 * Holds cues against the show that they stand in: their formations, and that they start and end near the music.
 * @param cues every cue unless told: what an edit of grid or soundtrack asks
 */
export function checkCuesIn(
	draft: DraftShow,
	cues: readonly Cue[] = draft.cues.order.map((id) => draft.cues.byId[id] as Cue),
): void {
	requireCues(cues, {
		formations: draft.formations.order,
		beats: draft.grid.beats,
		bars: draft.grid.bars,
		duration: draft.soundtrack?.duration ?? null,
	});
}
