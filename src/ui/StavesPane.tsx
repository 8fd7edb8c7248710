import { useCallback, useEffect, useMemo, useRef } from "react";
import { useStore } from "zustand";
import type { BeatDrag, CueDrag } from "../app/index.ts";
import { createStaves, type Staves } from "../staves/index.ts";
import { desk } from "./desk.ts";
import { sayTime } from "./say-place.ts";
import { useStudio, useStudioState } from "./studio-context.ts";
import { useBeatMap, useFrame, useFrameLoop } from "./use-frame.ts";
import { followStrip, zoomStrip } from "./zoom-strip.ts";

/** The staves: hands them what they draw, and their wishes to the commands. */
export function StavesPane() {
	const studio = useStudio();
	const loop = useFrameLoop();
	const host = useRef<HTMLElement>(null);
	const staves = useRef<Staves | null>(null);
	const show = useStudioState((state) => state.show);
	const analysis = useStudioState((state) => state.analysis);
	const check = useStudioState((state) => state.check);
	const unchecked = useStudioState((state) => state.unchecked);
	const selection = useStudioState((state) => state.selection);
	const strip = useStore(desk, (state) => state.strip);
	const beatMap = useBeatMap();
	const checks = useMemo(() => new Map((check?.transitions ?? []).map((one) => [one.id, one])), [check]);

	useEffect(() => {
		if (!host.current) return;
		let drag: CueDrag | null = null;
		let beatDrag: BeatDrag | null = null;
		const { commands } = studio;
		const made = createStaves(host.current, {
			seek: (seconds) => commands.seek(seconds),
			selectCue: (id, add) => {
				if (id === null) commands.select({ kind: "nothing" });
				else commands.selectCue(id, add);
				desk.setState({ margin: "detail" });
			},
			selectSection: (id) => {
				commands.select({ kind: "section", id });
				desk.setState({ margin: "detail" });
			},
			beginDrag: (id, part) => {
				drag = studio.dragCue(id, part);
				return drag !== null;
			},
			drag: (beats) => drag?.update(beats) ?? null,
			endDrag: (keep) => {
				if (keep) drag?.commit();
				else drag?.cancel();
				drag = null;
			},
			beginBeatDrag: (beat) => {
				beatDrag = studio.dragBeat(beat);
				return beatDrag !== null;
			},
			dragBeat: (seconds, free) => {
				const said = beatDrag?.update(seconds, free) ?? "";
				if (typeof said === "string") return said;
				const ms = Math.round(said.moved * 1000);
				return `${sayTime(said.at)}, ${ms < 0 ? "−" : "+"}${Math.abs(ms)} ms`;
			},
			endBeatDrag: (keep) => {
				if (keep) beatDrag?.commit();
				else beatDrag?.cancel();
				beatDrag = null;
			},
			insertBeat: (after) => commands.insertBeat(after),
			zoom: (factor, about) => zoomStrip({ studio, loop }, factor, about),
		});
		staves.current = made;
		const sizes = new ResizeObserver(() => made.resize());
		sizes.observe(host.current);
		return () => {
			sizes.disconnect();
			made.destroy();
			staves.current = null;
		};
	}, [studio, loop]);

	useEffect(() => {
		if (!show) return;
		staves.current?.show({
			show,
			analysis,
			checks,
			unchecked,
			selectedCues: new Set(selection.kind === "cues" ? selection.ids : []),
			selectedSection: selection.kind === "section" ? selection.id : null,
			strip,
		});
	}, [show, analysis, checks, unchecked, selection, strip]);

	const follow = useCallback(
		(seconds: number, moved: boolean) => {
			if (!moved) return;
			staves.current?.setPlayhead(seconds);
			const position = beatMap.positionAt(seconds);
			followStrip(position);
			staves.current?.reveal(position);
		},
		[beatMap],
	);
	useFrame(follow);
	return (
		// biome-ignore lint/a11y/noNoninteractiveTabindex: what scrolls has to be reached by keys too
		<section ref={host} className="staves" tabIndex={0} aria-label="Staves: the music with its cues" />
	);
}
