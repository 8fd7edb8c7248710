import { createStore } from "zustand/vanilla";
import type { NightViewpoint } from "../night/index.ts";

/** Which page of the margin is open. */
export type MarginPage = "detail" | "verdicts" | "care" | "formations" | "fleet-venue" | "hand-off" | "tray";

/** What only the screens know: where one looks, not what the show is. */
export interface Desk {
	readonly margin: MarginPage;
	readonly viewpoint: NightViewpoint;
	readonly showUnlit: boolean;
	/** Null: page view; else the strip's window in beats. */
	readonly strip: { readonly from: number; readonly to: number } | null;
	/** 3·M metres: slots that a remedy would have, shown in the night view while it is pointed at; null: none. */
	readonly ghost: Float64Array | null;
	readonly finder: boolean;
	/** The rough cut's question is open. */
	readonly asksRoughCut: boolean;
	/** The question how many beats a bar has from here on is open. */
	readonly asksMetre: boolean;
	readonly keysShown: boolean;
}

export const desk = createStore<Desk>(() => ({
	margin: "detail",
	viewpoint: "audience",
	showUnlit: true,
	strip: null,
	ghost: null,
	finder: false,
	asksRoughCut: false,
	asksMetre: false,
	keysShown: false,
}));
