import type { StoreApi } from "zustand/vanilla";
import type { Player } from "../platform/player.ts";
import type { Commands, CueDrag, Drag } from "./commands/command-types.ts";
import type { StudioState } from "./studio-state.ts";

/** The whole program but its screens: what is known, what can be done, and the sound. */
export interface Studio {
	readonly store: StoreApi<StudioState>;
	readonly commands: Commands;
	readonly player: Player;
	/** @param name as undo names it: "Move cue 12". Null where edits are refused. */
	drag(name: string): Drag | null;
	dragCue(id: string, part: "departs" | "arrives" | "whole"): CueDrag | null;
	close(): Promise<void>;
}
