import { addCue, applyEdit, find, putInTray, type Show, type ToReview } from "../show/index.ts";
import type { RetimeResult } from "./retime-show.ts";

/** What the designer decided about single cues of a retime. */
export interface RetimeChoices {
	/** Ids of cues that have been looked at and are right as they stand. */
	readonly looked: ReadonlySet<string>;
	/** Ids of cues that go to the tray instead. */
	readonly tray: ReadonlySet<string>;
	/** Indices of offers that are taken up. */
	readonly offers: ReadonlySet<number>;
}

/**
 * The show that a retime comes to once the designer has decided: offers taken up are cues of their own, cues sent away
 * wait in the tray, and what was marked for review and not looked at stays marked in the show itself.
 */
export function settleRetime({ show, cues, offers }: RetimeResult, choices: RetimeChoices): Show {
	return applyEdit(show, (draft) => {
		for (const index of [...choices.offers].sort((a, b) => a - b)) {
			const offer = offers[index];
			if (offer !== undefined) addCue(draft, offer.cue as Parameters<typeof addCue>[1]);
		}
		for (const id of choices.tray) if (find(draft.cues, id) !== undefined) putInTray(draft, id);
		const known = new Set((draft.review ?? []).map((one) => one.cue));
		const marked: ToReview[] = cues
			.filter(({ id, status }) => status === "review" && !choices.looked.has(id) && !choices.tray.has(id))
			.filter(({ id }) => !known.has(id))
			.map(({ id, reason }) => ({ cue: id, reason }));
		const standing = (draft.review ?? []).filter((one) => find(draft.cues, one.cue) !== undefined);
		if (standing.length + marked.length > 0) draft.review = [...standing, ...marked];
		else delete draft.review;
	}).show;
}
