import type { Seconds } from "../units/index.ts";
import type { BeatMap } from "./grid.ts";
import type { Cue, TransitionCue } from "./schema/cue.ts";
import type { Show } from "./show.ts";

export interface CueTimes {
	readonly start: Seconds;
	readonly end: Seconds;
}

/**
 * When a cue starts and ends. A pinned cue starts at its time in seconds whatever the grid does, and its length is
 * counted in beats from there.
 */
export function cueTimes(cue: Pick<Cue, "at" | "length" | "pinned">, beatMap: BeatMap): CueTimes {
	const at = cue.pinned === undefined ? cue.at : beatMap.positionAt(cue.pinned);
	const start = cue.pinned ?? beatMap.secondsAt(at);
	return { start, end: cue.length === 0 ? start : beatMap.secondsAt(at + cue.length) };
}

/** Where a cue starts, in beats, pinned or not. */
export function cuePosition(cue: Pick<Cue, "at" | "pinned">, beatMap: BeatMap): number {
	return cue.pinned === undefined ? cue.at : beatMap.positionAt(cue.pinned);
}

/** Cues by the time they start, ties in the order of the list. */
export function cuesInTime(show: Pick<Show, "cues">, beatMap: BeatMap): Cue[] {
	const timed = show.cues.order.map((id, index) => {
		const cue = show.cues.byId[id];
		return { cue, index, start: cueTimes(cue, beatMap).start };
	});
	timed.sort((a, b) => a.start - b.start || a.index - b.index);
	return timed.map(({ cue }) => cue);
}

/** The transitions of a show by the time they depart. */
export function transitionsInTime(show: Pick<Show, "cues">, beatMap: BeatMap): TransitionCue[] {
	return cuesInTime(show, beatMap).filter((cue): cue is TransitionCue => cue.kind === "transition");
}

/** Seconds: end of the soundtrack; without one, of the last beat or cue. */
export function endOfShow(show: Pick<Show, "cues" | "grid" | "soundtrack">, beatMap: BeatMap): Seconds {
	if (show.soundtrack !== null) return show.soundtrack.duration;
	let end = show.grid.beats.length > 0 ? show.grid.beats[show.grid.beats.length - 1] : 0;
	for (const id of show.cues.order) end = Math.max(end, cueTimes(show.cues.byId[id], beatMap).end);
	return end;
}
