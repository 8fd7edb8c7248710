import { createContext, useContext } from "react";
import { useStore } from "zustand";
import type { Studio, StudioState } from "../app/index.ts";

export const StudioContext = createContext<Studio | null>(null);

/** The program behind the screens. */
export function useStudio(): Studio {
	const studio = useContext(StudioContext);
	if (!studio) throw new Error("No studio stands above this part of the screen.");
	return studio;
}

/** A part of the state; the caller is drawn anew when it changes. */
export function useStudioState<T>(pick: (state: StudioState) => T): T {
	return useStore(useStudio().store, pick);
}
