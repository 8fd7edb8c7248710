import {
	addCue,
	addFormation,
	type CueChange,
	changeCue,
	changeFormation,
	createBeatMap,
	type DraftShow,
	find,
	type NewCue,
	type NewFormation,
	setOpening,
} from "../../show/index.ts";
import { StarstaveError } from "../../units/index.ts";

/** One change of the show that a remedy makes; plain data, so that it crosses from a worker. */
export type RemedyStep =
	| { readonly do: "change-cue"; readonly id: string; readonly change: CueChange }
	| { readonly do: "add-cue"; readonly cue: NewCue }
	| { readonly do: "change-formation"; readonly id: string; readonly change: Partial<Omit<NewFormation, "id">> }
	/** A copy of formation `of` under the new id `id`; colours and groups come along. */
	| {
			readonly do: "copy-formation";
			readonly of: string;
			readonly id: string;
			readonly change: Partial<Omit<NewFormation, "id">>;
	  }
	| { readonly do: "add-formation"; readonly formation: NewFormation }
	| { readonly do: "set-opening"; readonly id: string };

/** A computed change that makes a transition or a formation fly, with what it costs. */
export interface Remedy {
	/** "depart-earlier", "shrink", "waypoint" … */
	readonly kind: string;
	/** The change as a sentence: "Depart 3 beats earlier." */
	readonly change: string;
	/** What it costs, as sentences. */
	readonly cost: string;
	/** How much the audience loses, from 0 (nothing to be seen) to about 1 (another picture): what remedies are sorted by. */
	readonly loss: number;
	/** Applied together, in this order, as one edit. */
	readonly steps: readonly RemedyStep[];
	/** 3·M metres: the lit slots that a new or changed formation would have; null where no formation changes. */
	readonly ghost: Float64Array | null;
}

/**
 * Applies a remedy inside an edit.
 * @throws StarstaveError where the show no longer is the one that the remedy was computed for
 */
export function applyRemedy(draft: DraftShow, remedy: Pick<Remedy, "steps">): void {
	for (const step of remedy.steps) applyStep(draft, step);
}

function applyStep(draft: DraftShow, step: RemedyStep): void {
	switch (step.do) {
		case "change-cue": {
			const cue = find(draft.cues, step.id);
			const { at } = step.change;
			// A pinned cue starts at its time in seconds: to move it is to pin it elsewhere.
			const pinned =
				cue?.pinned === undefined || at === undefined ? {} : { pinned: createBeatMap(draft.grid).secondsAt(at) };
			changeCue(draft, step.id, { ...step.change, ...pinned });
			return;
		}
		case "add-cue":
			addCue(draft, step.cue);
			return;
		case "change-formation":
			changeFormation(draft, step.id, step.change);
			return;
		case "copy-formation": {
			const original = find(draft.formations, step.of);
			if (original === undefined) {
				throw new StarstaveError(
					"show",
					`The show has no formation with the id ${step.of} any more; look for remedies anew.`,
				);
			}
			addFormation(draft, { ...(original as NewFormation), ...step.change, id: step.id });
			return;
		}
		case "add-formation":
			addFormation(draft, step.formation);
			return;
		case "set-opening":
			setOpening(draft, step.id);
	}
}

/** Those that cost the audience least first. */
export function bestFirst(remedies: readonly Remedy[]): Remedy[] {
	return [...remedies].sort((a, b) => a.loss - b.loss);
}
