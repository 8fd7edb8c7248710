import { TIGHT_SHARE } from "../../units/index.ts";

export function sayBeats(beats: number): string {
	return beats === 1 ? "1 beat" : `${beats} beats`;
}

/** What the change leaves in hand. */
export function inHand(available: number, needed: number): string {
	const spare = available - needed;
	return needed > (1 - TIGHT_SHARE) * available
		? `leaves ${spare.toFixed(1)} s in hand, which is tight`
		: `leaves ${spare.toFixed(1)} s in hand`;
}
