import type { Care, LegTraces, Remedy, ShowCheck, ShowFlight } from "../core/flight/index.ts";
import type { Flash, LightProgram } from "../core/light/index.ts";
import type { Analysis } from "../core/music/index.ts";
import type { FleetSlots, Show } from "../core/show/index.ts";
import type { PlayerState } from "../platform/player.ts";
import type { AfterEdit, NewEdit } from "./new-edit.ts";

/** Work under way that takes longer than a blink. */
export interface Job {
	readonly id: string;
	/** As the user reads it: "Listening to the soundtrack". */
	readonly name: string;
	/** 0..1, or null where unknown. */
	readonly share: number | null;
	readonly stage: string;
}

/** A sentence for the user; errors stay until they are put away. */
export interface Notice {
	readonly id: string;
	readonly kind: "error" | "caution" | "done";
	readonly text: string;
}

/** What is selected: Detail tells about it. */
export type Selection =
	| { readonly kind: "nothing" }
	| { readonly kind: "cues"; readonly ids: readonly string[] }
	| { readonly kind: "section"; readonly id: string }
	| { readonly kind: "formation"; readonly id: string };

/** What has been found out about one part of the show that is being looked into. */
export interface Inquired {
	readonly part: { readonly kind: "leg" | "formation"; readonly id: string };
	/** Of a leg; null until they are there. */
	readonly traces: LegTraces | null;
	/** Of what doesn't fly, beside those that the check itself names; best first. */
	readonly remedies: readonly Remedy[];
	/** More may be found. */
	readonly searching: boolean;
}

/** Everything the screens show. Typed arrays (plans, peaks, curves) are held by reference and never patched. */
export interface StudioState {
	/** False until the autosave has been looked at: nothing is shown before. */
	readonly started: boolean;
	readonly show: Show | null;
	/** Why edits are refused: another tab has this show, or it is newer than this program. Null: edits are taken. */
	readonly readOnly: string | null;
	/** Base name of the file that the show was opened from or saved to. */
	readonly fileName: string | null;
	/** True when there are edits that no file holds yet (the autosave holds them always). */
	readonly unsaved: boolean;
	/** Title of the show that stood here before the last one was opened; it can be brought back. */
	readonly previous: string | null;
	/** The soundtrack's bytes are here and decoded, so it can be played. */
	readonly audioReady: boolean;
	/** What the user should know about the soundtrack: "8 kHz, so nothing above 4 kHz is heard". */
	readonly soundNotes: readonly string[];
	readonly analysis: Analysis | null;
	/** Follow from the show; recomputed after each edit. Null until first computed or where it can't be. */
	readonly slots: ReadonlyMap<string, FleetSlots> | null;
	/** 3·N metres on the take-off grid. */
	readonly ground: Float64Array | null;
	readonly light: LightProgram | null;
	readonly flight: ShowFlight | null;
	readonly check: ShowCheck | null;
	/** Worked out after the check, so it may be older than the show for a moment. */
	readonly care: Care | null;
	/** More flashes a second than WCAG 2.3.1 allows, as sentences with their places: a warning. */
	readonly flashes: readonly Flash[];
	/** Ids of transitions (and "launch", "landing") whose answer is older than the show. */
	readonly unchecked: ReadonlySet<string>;
	/** The part of the show that is being looked into; null: none. */
	readonly inquired: Inquired | null;
	/** A new edit of the soundtrack that is being looked at; null: none. */
	readonly newEdit: NewEdit | null;
	/** Seconds heard at each tap along with the music; null: nobody is tapping. */
	readonly taps: readonly number[] | null;
	/** What the last new edit that was taken over has come to, as long as it stands; null: none. */
	readonly afterEdit: AfterEdit | null;
	/** The part of playing that doesn't change with every frame; where the ear is, says `player.heardAt`. */
	readonly playback: PlayerState;
	readonly selection: Selection;
	readonly jobs: readonly Job[];
	readonly notices: readonly Notice[];
	/** What undo and redo would take back or bring again, as the user reads it; null: nothing. */
	readonly undo: string | null;
	readonly redo: string | null;
}
