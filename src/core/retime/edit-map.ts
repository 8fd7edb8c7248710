/**
 * The edit map: which stretch of the old soundtrack became which stretch of the new one. Plain data, so that it crosses
 * to a worker and into a file as it is.
 */

/** Kept: plays at its old speed. Stretched: at another. Cut: no place in the new one. Inserted: not in the old one. */
export type StretchKind = "kept" | "stretched" | "cut" | "inserted";

export interface Stretch {
	readonly kind: StretchKind;
	/** Seconds in the old soundtrack; of no length where something was inserted. */
	readonly old: readonly [from: number, to: number];
	/** Seconds in the new one; of no length where something was cut. */
	readonly new: readonly [from: number, to: number];
	/** Old seconds a new second: 1.01 is one per cent faster. Null for what was cut or inserted. */
	readonly rate: number | null;
	/** 0..1: how sure it is that this, and no other place, is where the music went. */
	readonly confidence: number;
	/** True where the samples are the same ones, so that the offset holds to the sample. */
	readonly exact: boolean;
}

/** A place in the new soundtrack where one stretch ends and another begins. */
export interface Joint {
	/** Seconds in the new soundtrack. */
	readonly at: number;
	/** Seconds to either side within which the joint may lie. */
	readonly spread: number;
	/** Where two readings cost nearly the same: the joint may lie anywhere from … to, in new seconds. Else null. */
	readonly ambiguous: readonly [from: number, to: number] | null;
}

export interface EditMap {
	/** Rises whenever the same samples would give another map. */
	readonly version: number;
	/** same: not a sample differs. edited: something moved, or sounds otherwise. different: another piece altogether. */
	readonly verdict: "same" | "edited" | "different";
	/** Seconds. */
	readonly oldDuration: number;
	readonly newDuration: number;
	/** Every stretch, by its place in the new soundtrack; cuts stand where the music would have been. */
	readonly stretches: readonly Stretch[];
	readonly joints: readonly Joint[];
	/** What the user should know, as sentences. */
	readonly notes: readonly string[];
}

/** Old and new seconds that the designer says are the same place in the music. */
export interface AnchorPair {
	readonly old: number;
	readonly new: number;
}

/** True for the stretches that carry old music: kept or stretched. */
export function isCarried(stretch: Stretch): boolean {
	return stretch.kind === "kept" || stretch.kind === "stretched";
}

/** The new second of an old one by one carried stretch, its line going on past its ends. */
export function newTimeIn(stretch: Stretch, old: number): number {
	return stretch.new[0] + (old - stretch.old[0]) / (stretch.rate ?? 1);
}

/** The old second of a new one by one carried stretch. */
export function oldTimeIn(stretch: Stretch, time: number): number {
	return stretch.old[0] + (time - stretch.new[0]) * (stretch.rate ?? 1);
}

/** The new second where what is heard at an old one is; where it was cut, the place where it would have been. */
export function toNew(map: EditMap, old: number): number {
	const carried = map.stretches.filter(isCarried);
	const at = carried.find((one) => old >= one.old[0] && old < one.old[1]);
	if (at !== undefined) return newTimeIn(at, old);
	const before = carried.filter((one) => one.old[1] <= old).sort((a, b) => b.old[1] - a.old[1])[0];
	return before?.new[1] ?? 0;
}

/** Likewise the old second of a new one. */
export function toOld(map: EditMap, time: number): number {
	const carried = map.stretches.filter(isCarried);
	const at = carried.find((one) => time >= one.new[0] && time < one.new[1]);
	if (at !== undefined) return oldTimeIn(at, time);
	const before = carried.filter((one) => one.new[1] <= time).at(-1);
	return before?.old[1] ?? 0;
}
