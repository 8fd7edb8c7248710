import { find } from "../../show/index.ts";
import { TIGHT_SHARE } from "../../units/index.ts";
import type { TransitionCheck } from "../check.ts";
import type { End } from "./ends.ts";
import type { Trial, TrialBase } from "./trial.ts";

export function sayBeats(beats: number): string {
	return beats === 1 ? "1 beat" : `${beats} beats`;
}

/** What the change leaves in hand. */
export function inHand(available: number, needed: number): string {
	const spare = available - needed;
	return needed > (1 - TIGHT_SHARE) * available
		? `leaves ${spare.toFixed(1)} s in hand, which is tight`
		: `leaves ${spare.toFixed(1)} s in hand`;
}

/** What the change does to other times at which the show stands in the same formation. */
export function sayOthers(end: End): string {
	if (end.elsewhere === 0) return "";
	const times = end.elsewhere === 1 ? "the other time" : `the ${end.elsewhere} other times`;
	return `A copy is made for this time alone; ${times} ${end.name} is shown, it stays as it is.`;
}

/** What is left in hand here, and in other transitions that the change gave another flight. */
export function sayTime(base: TrialBase, trial: Trial, check: TransitionCheck): string {
	const parts: string[] = [];
	const own = trial.outcomes.get(check.id);
	if (own?.available != null) parts.push(inHand(own.available, own.needed));
	for (const [id, { available, needed }] of trial.outcomes) {
		if (id === check.id || available === null) continue;
		const cue = find(base.show.cues, id);
		if (cue !== undefined) parts.push(`cue ${cue.number} keeps ${(available - needed).toFixed(1)} s in hand`);
	}
	const text = parts.join("; ");
	return text === "" ? "" : `${text[0].toUpperCase()}${text.slice(1)}.`;
}
