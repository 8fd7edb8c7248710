import { useMemo } from "react";
import { fitTaps, type TapFit } from "../core/music/index.ts";
import { sayTime } from "./say-place.ts";
import { useStudio, useStudioState } from "./studio-context.ts";

/** What the taps so far would make of the beats; nothing changes until they are taken over. */
export function Tapping() {
	const { commands } = useStudio();
	const taps = useStudioState((state) => state.taps);
	const analysis = useStudioState((state) => state.analysis);
	const fit = useMemo(() => (taps === null ? null : fitTaps(taps, analysis?.beats ?? [])), [taps, analysis]);
	if (taps === null) return null;
	return (
		<section className="floating tapping" aria-label="Tapping along">
			<p role="status">
				{taps.length === 1 ? "1 tap" : `${taps.length} taps`}.{" "}
				{fit === null ? "Go on with J on every beat." : sayFit(fit)}
			</p>
			<div className="buttons">
				<button type="button" className="first" disabled={fit === null} onClick={() => commands.takeTaps()}>
					Take the beats over
				</button>
				<button type="button" onClick={() => commands.dropTaps()}>
					Leave them
				</button>
			</div>
		</section>
	);
}

function sayFit({ beats, bpm, level }: TapFit): string {
	const where = `from ${sayTime(beats[0])} to ${sayTime(beats[beats.length - 1])}`;
	const tempo = `${bpm.toFixed(1)} beats a minute`;
	if (level === 1) return `${tempo}, on the beats that were heard, ${where}.`;
	if (level === 2) return `${tempo}, every second one of the beats that were heard, ${where}.`;
	if (level === 0.5) return `${tempo}, twice as many beats as were heard, ${where}.`;
	return `${tempo}, off the beats that were heard: your taps, smoothed, ${where}.`;
}
