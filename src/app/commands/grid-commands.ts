import { fitTaps } from "../../core/music/index.ts";
import {
	createBeatMap,
	deleteBeat,
	doubleBeats,
	halveBeats,
	insertBeat,
	joinSections,
	layBeats,
	moveBeat,
	moveSectionStart,
	renameSection,
	setGrid,
	setMetre,
	setSectionLetter,
	setSections,
	shiftBars,
	shiftBeats,
	splitSection,
} from "../../core/show/index.ts";
import { gridOf, sectionsOf } from "../heard-grid.ts";
import { levelOf, sectionsAt } from "../section-levels.ts";
import type { Workbench } from "../workbench.ts";
import type { GridCommands } from "./command-types.ts";

/** Edits of the beat grid and of sections. */
export function gridCommands(bench: Workbench): GridCommands {
	const { store, notices } = bench;
	return {
		shiftBeats: (seconds) => bench.edit("Shift the beats", (draft) => shiftBeats(draft, seconds)) !== null,
		shiftBars: (beats) => bench.edit("Shift the bars", (draft) => shiftBars(draft, beats)) !== null,
		setDownbeat: (beat) => {
			const { show } = store.getState();
			if (show === null) return bench.mayEdit();
			const beatMap = createBeatMap(show.grid);
			const inBar = Math.round(beatMap.barAt(beat).beat) - 1;
			// The shorter way round, so that bar numbers move as little as they can.
			const metre = beatMap.beatsPerBarAt(beat);
			const shift = inBar > metre / 2 ? inBar - metre : inBar;
			return bench.edit("Set the downbeat", (draft) => shiftBars(draft, shift)) !== null;
		},
		doubleBeats: () => bench.edit("Double the beats", doubleBeats) !== null,
		halveBeats: () => bench.edit("Halve the beats", halveBeats) !== null,
		moveBeat: (beat, seconds) => bench.edit("Move a beat", (draft) => moveBeat(draft, beat, seconds)) !== null,
		insertBeat: (after) => bench.edit("Put a beat in", (draft) => insertBeat(draft, after)) !== null,
		deleteBeat: (beat) => bench.edit("Take a beat out", (draft) => deleteBeat(draft, beat)) !== null,
		tapBeat: () => {
			if (!bench.mayEdit()) return;
			const { player } = bench.parts;
			const heard = player.heardAt(performance.now());
			store.setState(({ taps }) => ({ taps: [...(taps ?? []), heard] }));
		},
		takeTaps: () => {
			const { taps, analysis } = store.getState();
			const fit = taps === null ? null : fitTaps(taps, analysis?.beats ?? []);
			if (fit === null) {
				notices.say("caution", "A few more taps are needed, at least six along with the music.");
				return false;
			}
			store.setState({ taps: null });
			return bench.edit("Beats tapped along", (draft) => layBeats(draft, fit.beats)) !== null;
		},
		dropTaps: () => store.setState({ taps: null }),
		setMetre: (fromBeat, beatsPerBar, until) =>
			bench.edit("Set the metre", (draft) => setMetre(draft, fromBeat, beatsPerBar, until)) !== null,
		takeAnalysedGrid: () => {
			const { analysis } = store.getState();
			if (analysis === null) {
				notices.say("caution", "Nothing has been heard yet: open the soundtrack first.");
				return false;
			}
			return (
				bench.edit("Take the grid as heard", (draft) => {
					setGrid(draft, gridOf(analysis));
					setSections(draft, sectionsOf(analysis));
				}) !== null
			);
		},
		setSections: (sections) => bench.edit("Change the sections", (draft) => setSections(draft, sections)) !== null,
		divideSections: (levels) => {
			const { show, analysis } = store.getState();
			const level = show === null || analysis === null ? null : levelOf(analysis, show);
			if (show === null || analysis === null || level === null) {
				notices.say("caution", "Sections are divided by what was heard in the soundtrack, and nothing was.");
				return false;
			}
			const now = JSON.stringify(show.sections);
			for (let next = level + levels; next >= 0 && next < analysis.sectionLevels.length; next += levels) {
				const sections = sectionsAt(analysis, next, show);
				if (JSON.stringify(sections) === now) continue;
				return (
					bench.edit(levels > 0 ? "Finer sections" : "Coarser sections", (draft) => setSections(draft, sections)) !==
					null
				);
			}
			notices.say(
				"caution",
				levels > 0
					? "These are the finest sections that were heard."
					: "These are the coarsest sections that were heard.",
			);
			return false;
		},
		renameSection: (id, name) => bench.edit("Name a section", (draft) => renameSection(draft, id, name)) !== null,
		setSectionLetter: (id, letter) =>
			bench.edit("Set a section's letter", (draft) => setSectionLetter(draft, id, letter)) !== null,
		moveSectionStart: (id, beat) =>
			bench.edit("Move a section's start", (draft) => moveSectionStart(draft, id, beat)) !== null,
		splitSection: (id, beat) => {
			const made = bench.edit("Split a section", (draft) => splitSection(draft, id, beat));
			return typeof made === "string" ? made : null;
		},
		joinSections: (id) => bench.edit("Join sections", (draft) => joinSections(draft, id)) !== null,
	};
}
