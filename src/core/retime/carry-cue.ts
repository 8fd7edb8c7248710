/** One cue through the edit map: where its own music went, and what about that a designer should look at. */
import { type BeatMap, type Cue, cueTimes } from "../show/index.ts";
import { type EditMap, isCarried, type Stretch } from "./edit-map.ts";
import { type Place, placesOf, spreadAt } from "./places.ts";

/** A cue's length in seconds may become so many times longer or shorter before it is marked for review. */
const STRETCHED_BEYOND = 1.25;
/** Seconds of music that a transition may lose or gain unmentioned. */
const UNMENTIONED = 0.06;
/** Share of a transition's music that must be left for it to stay in the show when its start was cut. */
const LEAST_LEFT = 0.5;
/** Confidence of a stretch under which every cue on it is to be looked at. */
const UNSURE = 0.3;

export interface CarriedTimes {
	/** New seconds; null for an orphan. */
	readonly start: number | null;
	readonly end: number;
	/** The stretch that the start went with; null outside the music. */
	readonly stretch: Stretch | null;
	readonly status: "moved" | "orphan" | "review";
	readonly reason: string;
	/** Further places in the new soundtrack where all of the cue's music is heard again. */
	readonly again: readonly Place[];
}

const seconds = (value: number): string => `${Math.abs(value).toFixed(Math.abs(value) < 9.95 ? 2 : 1)} s`;

/** "15.00 s earlier", "12 ms later", "in place" */
export function describeShift(from: number, to: number): string {
	const by = to - from;
	if (Math.abs(by) < 5e-7) return "in place";
	const size = Math.abs(by) < 0.1 ? `${(Math.abs(by) * 1000).toFixed(1)} ms` : seconds(by);
	return `${size} ${by < 0 ? "earlier" : "later"}`;
}

export function carryCue(cue: Cue, map: EditMap, oldBeats: BeatMap): CarriedTimes {
	const { start, end } = cueTimes(cue, oldBeats);
	const outside = beyondMusic(start, end, map);
	if (outside !== null) return outside;
	const places = placesOf(map, start);
	if (places.length === 0) return withoutStart(cue, start, end, map);
	const length = end - start;
	const whole = places.filter((place) => holdsEnd(map, place.stretch, end));
	const chosen = whole[0] ?? places[0];
	const again = (whole.length > 0 ? whole : []).filter((place) => place !== chosen);
	const reasons: string[] = [];
	let newEnd = chosen.time;
	if (length > 0) {
		if (whole.length > 0) newEnd = endIn(map, chosen.stretch, end);
		else {
			const later = endPlace(map, end, chosen.time);
			newEnd = later ?? chosen.stretch.new[1];
			reasons.push(...lostMusic(cue, length, newEnd - chosen.time, later === null));
		}
		const ratio = (newEnd - chosen.time) / length;
		if (reasons.length === 0 && (ratio > STRETCHED_BEYOND || ratio < 1 / STRETCHED_BEYOND)) {
			reasons.push(`It now lasts ${seconds(newEnd - chosen.time)} instead of ${seconds(length)}.`);
		}
	}
	reasons.push(...aboutPlace(map, chosen, start));
	return {
		start: chosen.time,
		end: newEnd,
		stretch: chosen.stretch,
		status: reasons.length > 0 ? "review" : "moved",
		reason: reasons.length > 0 ? reasons.join(" ") : `Stays on its music, ${describeShift(start, chosen.time)}.`,
		again,
	};
}

/** Cues before the sound keep their seconds to its start, cues after it theirs to its end. */
function beyondMusic(start: number, end: number, map: EditMap): CarriedTimes | null {
	const shift = start < 0 ? 0 : start > map.oldDuration ? map.newDuration - map.oldDuration : null;
	if (shift === null) return null;
	const reachesIn = start < 0 && end > 0;
	const later = reachesIn ? endPlace(map, end, start) : null;
	const newEnd = later ?? end + shift;
	const changed = reachesIn && Math.abs(newEnd - start - (end - start)) > UNMENTIONED;
	const where = start < 0 ? "before the music, in place" : `after the music, ${describeShift(start, start + shift)}`;
	return {
		start: start + shift,
		end: newEnd,
		stretch: null,
		status: changed ? "review" : "moved",
		reason: changed
			? `It starts before the music and now lasts ${seconds(newEnd - start)} instead of ${seconds(end - start)}.`
			: `Stands ${where}.`,
		again: [],
	};
}

/** The start was cut: an orphan, save a transition most of whose music is left. */
function withoutStart(cue: Cue, start: number, end: number, map: EditMap): CarriedTimes {
	const orphan = (reason: string): CarriedTimes => ({
		start: null,
		end: 0,
		stretch: null,
		status: "orphan",
		reason,
		again: [],
	});
	if (cue.kind !== "transition" || !(end > start)) return orphan("Its music is not in the new edit.");
	for (const stretch of map.stretches) {
		if (!isCarried(stretch) || end <= stretch.old[0] || !holdsEnd(map, stretch, end)) continue;
		const left = (end - stretch.old[0]) / (end - start);
		if (left < LEAST_LEFT) continue;
		return {
			start: stretch.new[0],
			end: endIn(map, stretch, end),
			stretch,
			status: "review",
			reason: `The first ${seconds(stretch.old[0] - start)} of its music were cut; it now departs at the joint.`,
			again: [],
		};
	}
	return orphan("Its music is not in the new edit.");
}

/** True where a stretch, or those that go on from it without a break, reach the old second `end`. */
function holdsEnd(map: EditMap, stretch: Stretch, end: number): boolean {
	let last = stretch;
	for (;;) {
		const atEnd = map.oldDuration - last.old[1] < 0.05;
		if (end <= last.old[1] + spreadAt(map, last.new[1]) || atEnd) return true;
		const next = goesOn(map, last);
		if (next === null) return false;
		last = next;
	}
}

/** The new second of an old end that `holdsEnd` found; an end on the joint is at the joint. */
function endIn(map: EditMap, stretch: Stretch, end: number): number {
	let last = stretch;
	for (;;) {
		const next = end > last.old[1] ? goesOn(map, last) : null;
		if (next === null) break;
		last = next;
	}
	const time = last.new[0] + (end - last.old[0]) / (last.rate ?? 1);
	const isLast = map.oldDuration - last.old[1] < 0.05;
	return isLast ? time : Math.min(time, last.new[1]);
}

/** The stretch that goes on in both soundtracks where this one ends: a change of rate alone. */
function goesOn(map: EditMap, stretch: Stretch): Stretch | null {
	const next = map.stretches.find(
		(one) =>
			isCarried(one) &&
			one !== stretch &&
			Math.abs(one.new[0] - stretch.new[1]) < 1e-6 &&
			Math.abs(one.old[0] - stretch.old[1]) < 0.03,
	);
	return next ?? null;
}

/** The first new place of an old end after a new start; null where that music was cut. */
function endPlace(map: EditMap, end: number, after: number): number | null {
	for (const stretch of map.stretches) {
		if (!isCarried(stretch)) continue;
		const opens = stretch.old[0] + spreadAt(map, stretch.new[0]);
		const closes = stretch.old[1] + spreadAt(map, stretch.new[1]);
		const isLast = map.oldDuration - stretch.old[1] < 0.05;
		if (end <= opens || (end > closes && !isLast)) continue;
		const time = stretch.new[0] + (end - stretch.old[0]) / (stretch.rate ?? 1);
		if (time > after) return isLast ? time : Math.min(time, stretch.new[1]);
	}
	return null;
}

function lostMusic(cue: Cue, before: number, now: number, endCut: boolean): string[] {
	const lost = before - now;
	if (endCut) return [`The end of its music was cut; it now ends at the joint, ${seconds(now)} after it starts.`];
	if (Math.abs(lost) <= UNMENTIONED) return [];
	const ratio = now / before;
	const far = ratio > STRETCHED_BEYOND || ratio < 1 / STRETCHED_BEYOND;
	if (cue.kind !== "transition" && !far) return [];
	return [
		lost > 0
			? `${seconds(lost)} of its music were cut from within it; it now lasts ${seconds(now)} instead of ${seconds(before)}.`
			: `${seconds(lost)} of new music were put in within it; it now lasts ${seconds(now)} instead of ${seconds(before)}.`,
	];
}

/** What about the place itself should be looked at: a seam, two readings, an unsure stretch. */
function aboutPlace(map: EditMap, place: Place, old: number): string[] {
	const reasons: string[] = [];
	const { stretch, time } = place;
	const seam = map.joints.some((joint) => Math.abs(joint.at - time) <= Math.max(0.03, spreadAt(map, joint.at)));
	if (seam) reasons.push("It sits on a seam: the music before it is not what it was.");
	for (const { ambiguous } of map.joints) {
		if (ambiguous === null || time < ambiguous[0] || time > ambiguous[1] || seam) continue;
		reasons.push(
			`The music is alike on both sides of the seam, which may lie anywhere in ${seconds(ambiguous[1] - ambiguous[0])} around here; this may be the cue of the other side.`,
		);
		break;
	}
	if (stretch.confidence < UNSURE) {
		reasons.push(`It is not sure that this is where the music from ${seconds(old)} went.`);
	}
	return reasons;
}
