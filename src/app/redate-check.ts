import type { ShowCheck, TransitionCheck, Verdict } from "../core/flight/index.ts";
import { createBeatMap, cuePosition, cueTimes, find, type Show } from "../core/show/index.ts";
import { LIMIT_TOLERANCE, TIGHT_SHARE } from "../core/units/index.ts";

/**
 * The check of a show whose cues have moved in time, with no planning: a plan doesn't depend on the time it has. Needed
 * time stays; speeds go by 1/k, accelerations by 1/k², jerks by 1/k³ where the flight takes k times as long. What the
 * check says of launch, landing, endurance and remedies is left as it was, for the check proper to put right.
 * @param check answers for transitions of this show's cues, in formations and limits that have not changed
 */
export function redateCheck(check: ShowCheck, show: Show): ShowCheck {
	const beatMap = createBeatMap(show.grid);
	let flies = check.flies;
	const transitions = check.transitions.map((before) => {
		const cue = find(show.cues, before.id);
		if (cue === undefined) return before;
		const at = cuePosition(cue, beatMap);
		const { start, end } = cueTimes(cue, beatMap);
		if (start === before.departs.time && end === before.arrives.time) return before;
		const arrives = { beat: at + cue.length, time: end };
		return redate(before, { beat: at, time: start }, arrives, beatMap.positionAt, show.fleet.limits.spacing);
	});
	const bad = (one: TransitionCheck): boolean => !one.verdicts.includes("flies");
	if (transitions.some(bad)) flies = false;
	// What kept the show from flying may have been a transition alone; else the check proper will say.
	else if (check.transitions.some(bad) && othersFly(check)) flies = true;
	return { ...check, flies, transitions };
}

interface Moment {
	readonly beat: number;
	readonly time: number;
}

function redate(
	before: TransitionCheck,
	departs: Moment,
	arrives: Moment,
	positionAt: (seconds: number) => number,
	spacing: number,
): TransitionCheck {
	const available = arrives.time - departs.time;
	const { needed, peak, gap } = before;
	// A leg of no time at all has no finite speed: a millisecond stands for it, as in the proof.
	const k = Math.max(available, 1e-3) / Math.max(before.available, 1e-3);
	const slack = needed === null ? null : available - needed;
	const slackBeats = needed === null ? null : arrives.beat - positionAt(departs.time + needed);
	return {
		...before,
		departs,
		arrives,
		available,
		slack,
		slackBeats,
		verdicts: reverdict(before, available, spacing),
		peak: {
			horizontal: peak.horizontal / k,
			climb: peak.climb / k,
			descent: peak.descent / k,
			acceleration: peak.acceleration / k ** 2,
			jerk: peak.jerk / k ** 3,
		},
		gap: gap && { ...gap, time: departs.time + (gap.time - before.departs.time) * k },
		remedies: [],
	};
}

/** The geometry's verdicts stand; those of time are told anew, by the rules of the proof. */
function reverdict({ verdicts, needed, gap }: TransitionCheck, available: number, spacing: number): Verdict[] {
	const broken: Verdict[] = verdicts.filter((verdict) => verdict === "too-close" || verdict === "out-of-venue");
	if (needed === null || needed > available * (1 + LIMIT_TOLERANCE)) broken.unshift("too-fast");
	if (broken.length > 0) return broken;
	const tight =
		(needed !== null && needed > (1 - TIGHT_SHARE) * available) ||
		(gap !== null && gap.distance < (1 + TIGHT_SHARE) * spacing);
	return tight ? ["flies", "tight"] : ["flies"];
}

function othersFly({ launch, landing, formations, endurance }: ShowCheck): boolean {
	const good = (part: { readonly verdicts: readonly Verdict[] } | null): boolean =>
		part === null || part.verdicts.includes("flies");
	return good(launch) && good(landing) && formations.every(good) && endurance.airborne <= endurance.limit;
}
