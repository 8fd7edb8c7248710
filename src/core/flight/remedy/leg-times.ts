import { createBeatMap, type Show } from "../../show/index.ts";
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
	const timed = timedTransitions(show);
	const index = timed.findIndex(({ cue }) => cue.id === id);
	const before = timed[index - 1]?.arrives ?? beatMap.secondsAt(departs) - 60;
	const after = timed[index + 1]?.departs ?? Number.POSITIVE_INFINITY;
	const whole = needed.reduce((sum, seconds) => sum + seconds, 0) * 1.0001;
	const has = (early: number, late: number): boolean =>
		beatMap.secondsAt(arrives + late) - beatMap.secondsAt(departs - early) >= whole;
	let [early, late] = [0, 0];
	while (!has(early, late) && beatMap.secondsAt(departs - early - 1) >= before - 1e-9) early++;
	while (!has(early, late) && beatMap.secondsAt(arrives + late + 1) <= after + 1e-9 && late < 4096) late++;
	if (!has(early, late)) return null;
	const start = beatMap.secondsAt(departs - early);
	const end = beatMap.secondsAt(arrives + late);
	const beats = [departs - early];
	let passed = 0;
	for (const seconds of needed.slice(0, -1)) {
		passed += (seconds * (end - start)) / (whole / 1.0001);
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
