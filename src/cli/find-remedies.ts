import { bestFirst, mendedFormation, REMEDY_SEARCHES, type Remedy, searchRemedies } from "../core/flight/index.ts";
import { fleetSlotsOf } from "../core/formation/index.ts";
import type { Flown } from "./fly.ts";
import type { Progress } from "./progress.ts";

/** Transitions that are looked into: each asks for a few plans. */
const MOST = 10;

/** Remedies of formations by id, and the flown show with the remedies of its transitions made whole. */
export interface Mended {
	readonly flown: Flown;
	readonly formations: readonly { readonly id: string; readonly remedies: readonly Remedy[] }[];
}

/** Looks for remedies in space for what doesn't fly, beside those in time that the check names itself. */
export function findRemedies(flown: Flown, progress: Progress): Mended {
	const { show, flight, check } = flown;
	const slots = fleetSlotsOf(show);
	const failing = check.transitions.filter(({ verdicts }) => !verdicts.includes("flies"));
	const looked = new Set(failing.slice(0, MOST).map(({ id }) => id));
	let done = 0;
	const transitions = check.transitions.map((transition) => {
		if (!looked.has(transition.id)) return transition;
		progress.tell(done++ / looked.size, "looking for remedies");
		const found = REMEDY_SEARCHES.flatMap((search) =>
			searchRemedies(show, slots, flight, check, transition.id, search).map(({ remedy }) => remedy),
		);
		return { ...transition, remedies: bestFirst([...transition.remedies, ...found]) };
	});
	const formations = check.formations
		.filter(({ verdicts }) => !verdicts.includes("flies"))
		.map(({ id }) => ({
			id,
			remedies: mendedFormation(show, slots, flight, check, id).map(({ remedy }) => remedy),
		}));
	const notes = [...flown.notes];
	if (failing.length > MOST) {
		notes.push(
			`Remedies in space were looked for in the first ${MOST} of ${failing.length} transitions that don't fly; mend those and check again.`,
		);
	}
	return { flown: { ...flown, check: { ...check, transitions }, notes }, formations };
}
