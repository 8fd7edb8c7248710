import { describe, expect, it } from "vitest";
import { gridOf, sectionsOf } from "../../src/app/heard-grid.ts";
import { levelOf, sectionsAt } from "../../src/app/section-levels.ts";
import { decodeAudio } from "../../src/core/decode/index.ts";
import { type Analysis, analyse } from "../../src/core/music/index.ts";
import {
	applyEdit,
	createShow,
	renameSection,
	type Show,
	setGrid,
	setSections,
	splitSection,
} from "../../src/core/show/index.ts";
import { makeTrack } from "../e2e/make-track.ts";

describe("sections at other levels of detail", async () => {
	const samples = await decodeAudio(makeTrack(120, 48, 2).wav, "levels.wav");
	const analysis: Analysis = analyse(samples);
	const heard: Show = applyEdit(createShow(4), (draft) => {
		setGrid(draft, gridOf(analysis));
		setSections(draft, sectionsOf(analysis));
	}).show;

	it("are there from coarse to fine, and those of the analysis are the middle one", () => {
		const counts = analysis.sectionLevels.map((sections) => sections.length);
		expect(counts).toHaveLength(5);
		expect([...counts].sort((a, b) => a - b)).toEqual(counts);
		expect(counts[4]).toBeGreaterThan(counts[0]);
		expect(analysis.sectionLevels[2]).toEqual(analysis.sections);
		expect(levelOf(analysis, heard)).toBe(2);
	});

	it("cover the music without gap or overlap at every level", () => {
		analysis.sectionLevels.forEach((_, level) => {
			const sections = sectionsAt(analysis, level, heard);
			expect(sections[0].from).toBe(heard.sections[0].from);
			expect(sections.at(-1)!.to).toBe(heard.sections.at(-1)!.to);
			for (const [k, section] of sections.slice(1).entries()) expect(section.from).toBe(sections[k].to);
			expect(new Set(sections.map((section) => section.id)).size).toBe(sections.length);
			expect(sections).toHaveLength(analysis.sectionLevels[level].length);
		});
	});

	it("come back as they were when detail is turned up and down again", () => {
		const fine = applyEdit(heard, (draft) => setSections(draft, sectionsAt(analysis, 4, heard))).show;
		const back = sectionsAt(analysis, 2, fine);
		expect(back.map(({ from, to }) => [from, to])).toEqual(heard.sections.map(({ from, to }) => [from, to]));
	});

	it("keep borders set by hand, and names", () => {
		// In the middle of a bar, where nothing was heard to begin.
		const section = heard.sections[1];
		const at = section.from + 6;
		const edited = applyEdit(heard, (draft) => {
			splitSection(draft, section.id, at);
			renameSection(draft, heard.sections[0].id, "first light");
		}).show;
		for (const level of [0, 4]) {
			const sections = sectionsAt(analysis, level, edited);
			expect(sections.map(({ from }) => from)).toContain(at);
			expect(sections[0].name).toBe("first light");
		}
	});
});
