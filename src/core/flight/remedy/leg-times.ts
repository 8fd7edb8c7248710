import { type BeatMap, createBeatMap, type Show } from "../../show/index.ts";
import { timedTransitions } from "../show/leg-problems.ts";
import { sayBeats } from "./say-cost.ts";

/** When the parts of a transition depart and arrive. */
export interface Timing {
	/** Parts + 1 positions, in beats. */
	readonly beats: readonly number[];
	/** What is moved for it, as a sentence; empty where the time there was is enough. */
	readonly change: string;
	readonly loss: number;
}

/** Whole beats by which a transition may at most depart earlier and arrive later, and the seconds it then has. */
export interface Leeway {
	readonly early: number;
	readonly late: number;
	readonly seconds: number;
}

/** Beats before the opening or after the last picture that are looked at: longer than any hold that is wanted. */
const MOST_BEATS = 128;

/** What the holds before and after a transition have to give. */
export function leewayOf(show: Show, id: string, departs: number, arrives: number): Leeway {
	const { beatMap, before, after } = holdsAbout(show, id);
	let [early, late] = [0, 0];
	while (early < MOST_BEATS && beatMap.secondsAt(departs - early - 1) >= before - 1e-9) early++;
	while (late < MOST_BEATS && beatMap.secondsAt(arrives + late + 1) <= after + 1e-9) late++;
	return { early, late, seconds: beatMap.secondsAt(arrives + late) - beatMap.secondsAt(departs - early) };
}

/** Seconds: when the fleet has arrived before a transition, and departs after it. */
function holdsAbout(show: Show, id: string): { beatMap: BeatMap; before: number; after: number } {
	const timed = timedTransitions(show);
	const index = timed.findIndex(({ cue }) => cue.id === id);
	return {
		beatMap: createBeatMap(show.grid),
		before: timed[index - 1]?.arrives ?? Number.NEGATIVE_INFINITY,
		after: timed[index + 1]?.departs ?? Number.POSITIVE_INFINITY,
	};
}

/**
 * Shares the time of a transition out among its parts in proportion to what each needs; where that is too little, it
 * departs earlier by whole beats as far as the hold before allows, then arrives later as far as the hold after does.
 * @param needed seconds of each part
 * @returns null where the holds don't give that much
 */
export function shareTime(
	show: Show,
	id: string,
	departs: number,
	arrives: number,
	needed: readonly number[],
): Timing | null {
	const beatMap = createBeatMap(show.grid);
	const leeway = leewayOf(show, id, departs, arrives);
	const sum = needed.reduce((total, seconds) => total + seconds, 0);
	const has = (early: number, late: number): boolean =>
		beatMap.secondsAt(arrives + late) - beatMap.secondsAt(departs - early) >= sum * 1.0001;
	let [early, late] = [0, 0];
	while (!has(early, late) && early < leeway.early) early++;
	while (!has(early, late) && late < leeway.late) late++;
	if (!has(early, late)) return null;
	const start = beatMap.secondsAt(departs - early);
	const end = beatMap.secondsAt(arrives + late);
	const beats = [departs - early];
	let passed = 0;
	for (const seconds of needed.slice(0, -1)) {
		passed += (seconds * (end - start)) / sum;
		beats.push(beatMap.positionAt(start + passed));
	}
	beats.push(arrives + late);
	const moved = [
		early > 0 ? `depart ${sayBeats(early)} earlier` : "",
		late > 0 ? `arrive ${sayBeats(late)} later` : "",
	].filter((part) => part !== "");
	const sentence = moved.join(" and ");
	return {
		beats,
		change: sentence === "" ? "" : `${sentence[0].toUpperCase()}${sentence.slice(1)}.`,
		loss: Math.min(0.4, 0.02 * (early + 2 * late)),
	};
}
