import type { Proof, Verdict } from "./plan.ts";
import type { Remedy } from "./remedy/remedy.ts";

/** Answer of the feasibility check for one leg of the show, as the command line prints it. */
export interface TransitionCheck {
	/** The cue's id; "launch" and "landing" for those. */
	readonly id: string;
	/** Formation ids; "take-off grid" on the ground. */
	readonly from: string;
	readonly to: string;
	/** Beats and seconds; beat is null for launch and landing. */
	readonly departs: { readonly beat: number | null; readonly time: number };
	readonly arrives: { readonly beat: number | null; readonly time: number };
	/** Seconds. `needed` is null only where no duration works. */
	readonly available: number;
	readonly needed: number | null;
	readonly slack: number | null;
	readonly slackBeats: number | null;
	readonly straightLineBound: number;
	readonly verdicts: readonly Verdict[];
	readonly peak: Proof["peak"];
	/** Time in seconds of the show; drones from 0. */
	readonly gap: Proof["gap"];
	/** Where a drone first leaves the flight volume (`blocked` null) or enters a blocked one (its index): seconds of the show. */
	readonly breach: { readonly drone: number; readonly time: number; readonly blocked: number | null } | null;
	readonly certificate: { readonly assignment: string; readonly separation: string };
	readonly remedies: readonly Remedy[];
}

export interface FormationCheck {
	readonly id: string;
	/** Smallest distance between two of its slots, reserve slots included, m. */
	readonly gap: number;
	readonly verdicts: readonly Verdict[];
}

export interface ShowCheck {
	readonly flies: boolean;
	readonly launch: TransitionCheck | null;
	readonly landing: TransitionCheck | null;
	readonly transitions: readonly TransitionCheck[];
	readonly formations: readonly FormationCheck[];
	/** Seconds from motor start of the first wave to the last landing, and endurance less reserve. */
	readonly endurance: { readonly airborne: number; readonly limit: number };
	/** Sentences the designer must read: cautions, what could not be judged. */
	readonly notes: readonly string[];
}
