/**
 * The receipt of a retime: which transitions still fly the same geometry, only at another time or over another length,
 * and so need no new rehearsal. A plan holds neither clock time nor length, so what it is made from decides.
 */
import { createBeatMap, cueTimes, find, type Show, type TransitionCue, transitionsInTime } from "../show/index.ts";

export interface TransitionReceipt {
	/** The cue's id. */
	readonly cue: string;
	/** Formation ids; `from` is null where no formation stood before. */
	readonly from: string | null;
	readonly to: string;
	/**
	 * same: same paths, same duration, at most shifted. dilated: same paths over another duration. changed: other paths.
	 * new: not in the old show.
	 */
	readonly status: "same" | "dilated" | "changed" | "new";
	/** Seconds; null in a show that doesn't have it. */
	readonly oldDuration: number | null;
	readonly newDuration: number;
	/** A sentence: what differs. */
	readonly reason: string;
}

export interface RetimeReceipt {
	readonly transitions: readonly TransitionReceipt[];
	/** Ids of transitions that the new show no longer has. */
	readonly gone: readonly string[];
	/** Whether the way up to the opening, and down from the last formation, is the same. */
	readonly launch: "same" | "changed";
	readonly landing: "same" | "changed";
}

/** Seconds: durations that differ by less are the same; a millionth moves no drone by a hair. */
const SAME_DURATION = 1e-6;

interface Leg {
	readonly cue: TransitionCue;
	readonly from: string | null;
	readonly duration: number;
}

export function compareTransitions(old: Show, current: Show): RetimeReceipt {
	const before = new Map(legsOf(old).map((leg) => [leg.cue.id, leg]));
	const after = legsOf(current);
	const fleet = sameFleet(old, current);
	const formations = new Map<string, boolean>();
	const sameFormation = (id: string | null): boolean => {
		if (id === null) return true;
		const known = formations.get(id);
		if (known !== undefined) return known;
		const same = canonical(find(old.formations, id)) === canonical(find(current.formations, id));
		formations.set(id, same);
		return same;
	};
	const transitions = after.map((leg): TransitionReceipt => {
		const was = before.get(leg.cue.id);
		const common = { cue: leg.cue.id, from: leg.from, to: leg.cue.formation, newDuration: leg.duration };
		if (was === undefined) {
			return { ...common, status: "new", oldDuration: null, reason: "It is not in the old show." };
		}
		const oldDuration = was.duration;
		const changed = (reason: string): TransitionReceipt => ({ ...common, status: "changed", oldDuration, reason });
		if (was.from !== leg.from) return changed("It starts from another formation than before.");
		if (was.cue.formation !== leg.cue.formation) return changed("It goes to another formation than before.");
		if (!sameFormation(leg.from) || !sameFormation(leg.cue.formation)) return changed("A formation of it was changed.");
		if (fleet !== null) return changed(fleet);
		if (was.cue.timeLaw !== leg.cue.timeLaw) return changed("Its time law is another.");
		if (Math.abs(oldDuration - leg.duration) > SAME_DURATION) {
			const reason = `The same paths in ${leg.duration.toFixed(2)} s instead of ${oldDuration.toFixed(2)} s.`;
			return { ...common, status: "dilated", oldDuration, reason };
		}
		return { ...common, status: "same", oldDuration, reason: "The same paths in the same time." };
	});
	const kept = new Set(after.map((leg) => leg.cue.id));
	const takeoff = fleet === null && canonical(old.takeoff) === canonical(current.takeoff);
	const opening = takeoff && old.opening === current.opening && sameFormation(current.opening);
	const last = (show: Show, legs: readonly Leg[]): string | null =>
		legs[legs.length - 1]?.cue.formation ?? show.opening;
	const ends = [last(old, [...before.values()]), last(current, after)];
	return {
		transitions,
		gone: [...before.keys()].filter((id) => !kept.has(id)),
		launch: opening ? "same" : "changed",
		// The grid under the opening is laid by the tool, so the landing hangs on the opening too.
		landing: opening && ends[0] === ends[1] && sameFormation(ends[1]) ? "same" : "changed",
	};
}

function legsOf(show: Show): Leg[] {
	const beatMap = createBeatMap(show.grid);
	let stands = show.opening;
	return transitionsInTime(show, beatMap).map((cue) => {
		const { start, end } = cueTimes(cue, beatMap);
		const leg = { cue, from: stands, duration: end - start };
		stands = cue.formation;
		return leg;
	});
}

/** What of the fleet or venue would change every plan, as a sentence; null where nothing does. */
function sameFleet(old: Show, current: Show): string | null {
	if (old.fleet.count !== current.fleet.count) return "The fleet has another number of drones.";
	if (canonical(old.fleet.limits) !== canonical(current.fleet.limits)) return "The fleet's limits are others.";
	if (canonical(old.venue) !== canonical(current.venue)) return "The venue was changed.";
	return null;
}

/** JSON with keys in order, so that equal content gives equal text. */
function canonical(value: unknown): string {
	return (
		JSON.stringify(value, (_key, inner: unknown) =>
			inner !== null && typeof inner === "object" && !Array.isArray(inner)
				? Object.fromEntries(Object.entries(inner).sort(([a], [b]) => (a < b ? -1 : a > b ? 1 : 0)))
				: inner,
		) ?? ""
	);
}
