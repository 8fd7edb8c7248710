import { createContext, useContext, useEffect, useMemo } from "react";
import { type BeatMap, createBeatMap } from "../core/show/index.ts";
import type { FrameListener, FrameLoop } from "./frame-loop.ts";
import { useStudioState } from "./studio-context.ts";

export const FrameContext = createContext<FrameLoop | null>(null);

export function useFrameLoop(): FrameLoop {
	const loop = useContext(FrameContext);
	if (!loop) throw new Error("No frame loop stands above this part of the screen.");
	return loop;
}

/** Runs `listener` at each frame as long as the caller is on screen. */
export function useFrame(listener: FrameListener): void {
	const loop = useFrameLoop();
	useEffect(() => loop.listen(listener), [loop, listener]);
}

const EMPTY = createBeatMap({ beats: [], bars: [] });

/** The open show's beat grid as a map. */
export function useBeatMap(): BeatMap {
	const grid = useStudioState((state) => state.show?.grid ?? null);
	return useMemo(() => (grid ? createBeatMap(grid) : EMPTY), [grid]);
}
