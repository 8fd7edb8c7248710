import { openingOf } from "../core/flight/index.ts";
import { createBeatMap, find, type Show, transitionsInTime } from "../core/show/index.ts";

/**
 * What slots and legs follow from, by identity: edits replace what they change and leave the rest as it is, so that a
 * drag of a cue in time is told from a change of a formation without looking into either.
 */
export interface LegBasis {
	/** Everything but the legs: what of fleet and venue counts, take-off grid, opening, and all formations. */
	readonly common: readonly unknown[];
	/** Every leg of the show: its id, and what it depends on beside `common`. */
	readonly legs: ReadonlyMap<string, readonly unknown[]>;
}

/** The legs of a show in the order of time, launch first and landing last. */
export function basisOf(show: Show): LegBasis {
	const legs = new Map<string, readonly unknown[]>();
	let from: unknown = find(show.formations, openingOf(show));
	legs.set("launch", [show.takeoff, from]);
	for (const cue of transitionsInTime(show, createBeatMap(show.grid))) {
		const to = find(show.formations, cue.formation);
		legs.set(cue.id, [from, to, cue.timeLaw]);
		from = to;
	}
	legs.set("landing", [from, show.takeoff]);
	return { common: [spaceOf(show), show.takeoff, openingOf(show), show.formations], legs };
}

/** What of fleet and venue slots and plans depend on. Wind, mass and the like move no drone. */
function spaceOf({ fleet, venue }: Show): string {
	return JSON.stringify([fleet.count, fleet.limits, venue.volume, venue.blocked]);
}

const same = (a: readonly unknown[], b: readonly unknown[]): boolean =>
	a.length === b.length && a.every((one, i) => one === b[i]);

/** True where nothing needs to be laid or planned anew. */
export function sameBasis(a: LegBasis, b: LegBasis): boolean {
	if (!same(a.common, b.common) || a.legs.size !== b.legs.size) return false;
	const [before, after] = [[...a.legs], [...b.legs]];
	return before.every(([id, parts], i) => id === after[i][0] && same(parts, after[i][1]));
}

/** Ids of legs of `after` whose answer is no longer known from `before`. */
export function changedLegs(before: LegBasis | null, after: LegBasis): Set<string> {
	// All formations together are no part of one leg; the two that it flies between are.
	const sameCommon = before !== null && same(before.common.slice(0, 2), after.common.slice(0, 2));
	const changed = new Set<string>();
	for (const [id, parts] of after.legs) {
		const known = sameCommon ? before.legs.get(id) : undefined;
		if (known === undefined || !same(known, parts)) changed.add(id);
	}
	return changed;
}
