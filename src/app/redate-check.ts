import type { Leg, ShowCheck, ShowFlight, TransitionCheck, Verdict } from "../core/flight/index.ts";
import { type BeatMap, createBeatMap, cuePosition, find, type Show } from "../core/show/index.ts";
import { LIMIT_TOLERANCE, TIGHT_SHARE } from "../core/units/index.ts";

/**
 * The check of a show whose cues have moved in time, with no planning and no proof: a plan doesn't depend on the time it
 * has. Needed time stays; speeds go by 1/k, accelerations by 1/k², jerks by 1/k³ where the flight takes k times as long.
 * What the check says of landing, endurance and remedies is left for the check proper to put right.
 * @param check answers for the transitions of this show, in formations and limits that have not changed
 * @param flight of the show as it is now
 */
export function redateCheck(check: ShowCheck, show: Show, flight: ShowFlight): ShowCheck {
	const beatMap = createBeatMap(show.grid);
	const legs = new Map(flight.legs.map((leg) => [leg.id, leg]));
	const transitions = check.transitions.map((before) => {
		const leg = legs.get(before.id);
		if (leg === undefined || (leg.departs === before.departs.time && leg.arrives === before.arrives.time))
			return before;
		return redate(before, leg, show, beatMap);
	});
	const bad = (one: TransitionCheck): boolean => !one.verdicts.includes("flies");
	let { flies } = check;
	if (transitions.some(bad)) flies = false;
	else if (check.transitions.some(bad)) flies = othersFly(check);
	return { ...check, flies, transitions };
}

function redate(before: TransitionCheck, leg: Leg, show: Show, beatMap: BeatMap): TransitionCheck {
	const cue = find(show.cues, before.id);
	const available = leg.arrives - leg.departs;
	const { needed, peak, gap, breach } = before;
	// A leg of no time at all has no finite speed: a millisecond stands for it, as in the proof.
	const k = Math.max(available, 1e-3) / Math.max(before.available, 1e-3);
	const held = beatMap.positionAt(leg.departs);
	const departs = cue === undefined ? held : Math.max(cuePosition(cue, beatMap), held);
	const arrives = beatMap.positionAt(leg.arrives);
	return {
		...before,
		departs: { beat: departs, time: leg.departs },
		arrives: { beat: arrives, time: leg.arrives },
		available,
		slack: needed === null ? null : available - needed,
		slackBeats: needed === null ? null : arrives - beatMap.positionAt(leg.departs + needed),
		verdicts: reverdict(before, available, show.fleet.limits.spacing),
		peak: {
			horizontal: peak.horizontal / k,
			climb: peak.climb / k,
			descent: peak.descent / k,
			acceleration: peak.acceleration / k ** 2,
			jerk: peak.jerk / k ** 3,
		},
		gap: gap && { ...gap, time: leg.departs + (gap.time - before.departs.time) * k },
		breach: breach && { ...breach, time: leg.departs + (breach.time - before.departs.time) * k },
		remedies: [],
	};
}

/**
 * The geometry's verdicts stand; those of time are told anew, by the rules of the proof. Where the geometry breaks a
 * limit there is no needed time; whether it is too fast beside that is then told by the check proper.
 */
function reverdict({ verdicts, needed, gap }: TransitionCheck, available: number, spacing: number): Verdict[] {
	if (needed === null) return [...verdicts];
	if (needed > available * (1 + LIMIT_TOLERANCE)) return ["too-fast"];
	const tight =
		(needed > 0 && needed > (1 - TIGHT_SHARE) * available) ||
		(gap !== null && gap.distance < (1 + TIGHT_SHARE) * spacing);
	return tight ? ["flies", "tight"] : ["flies"];
}

function othersFly({ launch, landing, formations, endurance }: ShowCheck): boolean {
	const good = (part: { readonly verdicts: readonly Verdict[] } | null): boolean =>
		part === null || part.verdicts.includes("flies");
	return good(launch) && good(landing) && formations.every(good) && endurance.airborne <= endurance.limit;
}
