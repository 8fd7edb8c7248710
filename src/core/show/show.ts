import type { Cue } from "./schema/cue.ts";
import type { Fleet, Takeoff, Venue } from "./schema/fleet-venue.ts";
import type { Formation } from "./schema/shape.ts";
import type { Bar, DroneGroup, Section, Soundtrack, ToReview, TrayCue } from "./schema/show-file.ts";

/** Things with an id, in an order: what the file holds as an array. Edits of one thing make one patch. */
export interface Ordered<T> {
	readonly byId: Readonly<Record<string, T>>;
	readonly order: readonly string[];
}

/** The beat grid in memory: the arrays are immutable and replaced whole. */
export interface Grid {
	/** Seconds, strictly rising. */
	readonly beats: readonly number[];
	/** One entry for every bar, rising by `beat` (an index into `beats`). */
	readonly bars: readonly Bar[];
	readonly source: "analysed" | "edited";
	/** Indices of beats that were set by hand, rising. */
	readonly anchors?: readonly number[] | undefined;
}

/** The document in memory. Unknown keys of the file ride along untouched. */
export interface Show {
	readonly title: string;
	readonly notes: string;
	readonly soundtrack: Soundtrack | null;
	readonly grid: Grid;
	readonly sections: readonly Section[];
	readonly fleet: Fleet;
	readonly venue: Venue;
	/** Null: the tool lays a square grid of spacing pitch under the opening formation. */
	readonly takeoff: Takeoff | null;
	readonly opening: string | null;
	readonly formations: Ordered<Formation>;
	readonly groups: Ordered<DroneGroup>;
	readonly cues: Ordered<Cue>;
	/** The tray: cues whose music is gone, kept until they are put back. */
	readonly orphans?: readonly TrayCue[] | undefined;
	/** Cues that somebody should look at after a retime. */
	readonly review?: readonly ToReview[] | undefined;
	/** The soundtrack that this one is a new edit of. */
	readonly retimedFrom?: Soundtrack | undefined;
}
