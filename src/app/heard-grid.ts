import type { Analysis } from "../core/music/index.ts";
import { createBeatMap, type Grid, type Section, type Show } from "../core/show/index.ts";

/** The beat grid as the analysis heard it. */
export function gridOf(analysis: Analysis): Grid {
	return { beats: [...analysis.beats], bars: analysis.bars.map((bar) => ({ ...bar })), source: "analysed" };
}

/** Sections as heard, named later by hand. */
export function sectionsOf(analysis: Analysis): Section[] {
	return analysis.sections.map(({ letter, fromBeat, toBeat }, index) => ({
		id: `s${index + 1}`,
		name: "",
		letter,
		from: fromBeat,
		to: toBeat,
	}));
}

/** The analysis with grid and sections as the show has them, where they were put right by hand. */
export function analysisOnGrid(analysis: Analysis, { grid, sections }: Show): Analysis {
	if (grid.source !== "edited" && sections.length === 0) return analysis;
	const beats = Float64Array.from(grid.beats);
	const last = beats.length - 1;
	if (last < 0) return analysis;
	const beatMap = createBeatMap(grid);
	const heard = createBeatMap({ beats: [...analysis.beats], bars: analysis.bars });
	const whole = (beat: number): number => Math.min(beats.length, Math.max(0, Math.round(beat)));
	const secondsOf = (beat: number): number => (beat > last ? analysis.duration : beats[beat]);
	return {
		...analysis,
		beats,
		beatConfidence: grid.source === "edited" ? new Float32Array(beats.length).fill(1) : analysis.beatConfidence,
		bars: grid.bars,
		sections: sections.map(({ letter, from, to }) => {
			const [fromBeat, toBeat] = [whole(from), whole(to)];
			return { start: secondsOf(fromBeat), end: secondsOf(toBeat), fromBeat, toBeat, letter };
		}),
		// Moments are counted in beats of the grid that was heard; they stay where they are in the music.
		moments: analysis.moments.map((moment) => ({
			...moment,
			beat: whole(beatMap.positionAt(heard.secondsAt(moment.beat))),
		})),
	};
}
