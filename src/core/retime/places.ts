/** Where a moment of the old soundtrack is in the new one: nowhere, in one place, or in several. */
import { type EditMap, isCarried, newTimeIn, type Stretch } from "./edit-map.ts";

/** Seconds beside a joint's own spread within which a moment is on the joint; and the most that it ever is. */
const ON_JOINT = 0.01;
const MOST_ON_JOINT = 0.06;
/** Seconds: a stretch that begins or ends this near to an end of the old soundtrack reaches it. */
const AT_END = 0.05;
/** Seconds by which the edge of a trimmed end may be off. */
const TRIM = 0.003;

export interface Place {
	readonly stretch: Stretch;
	/** New seconds. */
	readonly time: number;
}

/** Seconds around a new time within which a joint may lie; 0 where there is none (an end of a soundtrack). */
export function spreadAt(map: EditMap, newTime: number): number {
	const joint = map.joints.find((one) => Math.abs(one.at - newTime) < 1e-4);
	return joint === undefined ? 0 : Math.min(MOST_ON_JOINT, joint.spread + ON_JOINT);
}

/**
 * Every place of an old second in the new soundtrack, in the new one's order. A moment on a joint belongs to the stretch
 * that begins there: a beat's sound comes after its time, so what ends there has lost it.
 */
export function placesOf(map: EditMap, old: number): Place[] {
	const places: Place[] = [];
	for (const stretch of map.stretches) {
		if (!isCarried(stretch)) continue;
		const [first, last] = stretch.old;
		const opens = first < AT_END ? Math.min(0, first) : first - Math.max(TRIM, spreadAt(map, stretch.new[0]));
		const closes =
			map.oldDuration - last < AT_END ? Number.POSITIVE_INFINITY : last - Math.max(TRIM, spreadAt(map, stretch.new[1]));
		if (old >= opens && old < closes && old <= map.oldDuration) places.push({ stretch, time: newTimeIn(stretch, old) });
	}
	return places;
}
