import type { Analysis } from "../music/index.ts";
import type { ColourCue, IntensityCue } from "../show/index.ts";
import { choosePalettes, paintSection } from "./palette.ts";
import type { MusicPlan } from "./read-music.ts";

type LightCue =
	| Pick<ColourCue, "kind" | "at" | "fade" | "paint" | "name">
	| Pick<IntensityCue, "kind" | "at" | "fade" | "level" | "name">;

/** Linear light at the music's quietest and loudest. */
const QUIET = 0.22;
const LOUD = 1;

/**
 * Colours by letter, one cue a section and one more in the midst of long ones; intensity that follows the loudness from
 * the first beat and goes out with the music.
 */
export function cutLight(music: MusicPlan, analysis: Analysis): LightCue[] {
	const { beatMap, sections, energies } = music;
	const cues: LightCue[] = [];
	const palettes = choosePalettes(energies.size > 0 ? energies : new Map([["A", 0.3]]));
	const start = sections[0]?.from ?? Math.ceil(beatMap.positionAt(0));
	for (const section of sections) {
		const palette = palettes.get(section.letter);
		if (!palette) continue;
		const beat = beatMap.secondsAt(section.from + 1) - beatMap.secondsAt(section.from);
		const stops = [section.from, ...music.turnsOf(section), section.to];
		for (let i = 0; i + 1 < stops.length; i++) {
			const dense = music.density(stops[i], stops[i + 1]);
			cues.push({
				kind: "colour",
				at: stops[i],
				fade: stops[i] === start ? 0 : 2,
				paint: paintSection(palette, dense, beat, i % 2 === 1),
				name: `${section.letter} ${section.name}`,
			});
		}
	}
	if (sections.length === 0) {
		const [palette] = palettes.values();
		cues.push({ kind: "colour", at: start, fade: 0, paint: paintSection(palette, 0, 1, false), name: "" });
	}
	cues.push({
		kind: "intensity",
		at: start,
		fade: 2,
		level: { follow: "loudness", from: QUIET, to: LOUD },
		name: "with the loudness",
	});
	const lastBeat = sections.at(-1)?.to ?? Math.floor(beatMap.positionAt(analysis.duration));
	const out = Math.max(start + 1, Math.min(lastBeat, Math.floor(beatMap.positionAt(analysis.duration))) - 4);
	cues.push({ kind: "intensity", at: out, fade: 4, level: 0, name: "out" });
	return cues;
}
