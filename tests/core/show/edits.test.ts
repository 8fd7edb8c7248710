import { describe, expect, it } from "vitest";
import {
	addCue,
	addFormation,
	applyEdit,
	changeCue,
	changeFormation,
	copyCues,
	createBeatMap,
	createShow,
	cueTimes,
	type DraftShow,
	doubleBeats,
	halveBeats,
	joinSections,
	moveCue,
	moveCues,
	moveSectionStart,
	patchShow,
	readShow,
	removeCues,
	removeFormation,
	renameSection,
	renumberCue,
	type Show,
	setCues,
	setFleet,
	setGrid,
	setLimits,
	setMetre,
	setOpening,
	setSections,
	setSoundtrack,
	setTitle,
	setVenue,
	shiftBars,
	shiftBeats,
	splitSection,
	toList,
	writeShow,
} from "../../../src/core/show/index.ts";
import { sampleText } from "./sample-show.ts";

const show = readShow(sampleText());

/** The edit's result, once undo and redo have been seen to lead back and forth and the file to take it. */
function edit(recipe: (draft: DraftShow) => unknown, from: Show = show): Show {
	const { show: after, patches, inverse } = applyEdit(from, recipe);
	expect(patchShow(after, inverse)).toEqual(from);
	expect(patchShow(from, patches)).toEqual(after);
	expect(readShow(writeShow(after))).toEqual(after);
	return after;
}

describe("edits of the document", () => {
	it("set title, fleet, limits, venue and opening as one step of undo each", () => {
		expect(edit((draft) => setTitle(draft, "Finale")).title).toBe("Finale");
		expect(edit((draft) => setLimits(draft, { horizontal: 4 })).fleet.limits).toMatchObject({
			horizontal: 4,
			climb: 3,
		});
		expect(edit((draft) => setVenue(draft, { wind: 5 })).venue).toMatchObject({ wind: 5, buffer: 10 });
		expect(edit((draft) => setOpening(draft, "f2")).opening).toBe("f2");
		expect(edit((draft) => setSoundtrack(draft, null)).soundtrack).toBeNull();
	});

	it("leave what they don't touch as the same object", () => {
		const after = edit((draft) => setTitle(draft, "Finale"));
		expect(after.cues).toBe(show.cues);
		expect(after.grid).toBe(show.grid);
	});

	it("let a smaller fleet take its drones out of the groups", () => {
		const after = edit((draft) => setFleet(draft, { count: 9 }));
		expect(after.groups.byId.g1.drones).toEqual([0]);
	});

	it("say in one sentence why they refuse, and leave the show as it was", () => {
		const before = JSON.stringify(show);
		const refused: readonly [(draft: DraftShow) => unknown, string][] = [
			[(d) => setLimits(d, { spacing: 0 }), "Fleet.limits.spacing is 0, but must be more than 0."],
			[(d) => setFleet(d, { count: -1 }), "Fleet.count is -1, but must be at least 0."],
			[(d) => setOpening(d, "f9"), "Opening is formation f9, but the show has only f1, f2."],
			[
				(d) => setVenue(d, { volume: { min: [0, 0, 50], max: [10, 10, 50] } }),
				"A volume of the venue runs from 50 m to 50 m up, but its min must lie below its max.",
			],
			[(d) => changeCue(d, "c9", { at: 1 }), "The show has no cue with the id c9."],
			[(d) => changeCue(d, "toString", { at: 1 }), "The show has no cue with the id toString."],
			[
				(d) => changeCue(d, "c3", { formation: "f7" }),
				"Cue 12 (id c3) goes to formation f7, but the show has only f1, f2.",
			],
			[(d) => changeCue(d, "c2", { fade: -1 }), "Cue 2 (id c2): fade is -1, but must be at least 0."],
			[(d) => changeCue(d, "c2", { at: Number.NaN }), "Cue 2 (id c2): at is NaN, but must be a number."],
			[
				(d) => addCue(d, { kind: "intensity", at: 1, level: 0, number: "12" }),
				"Cue 12 is in the show already; a new cue needs its own number.",
			],
			[(d) => removeFormation(d, "f2"), "Cue 12 goes to formation Heart (id f2); send it elsewhere first."],
			[
				(d) => setGrid(d, { ...show.grid, beats: [2, 1] }),
				"Beat 1 of the grid stands at 1 s, but must come after beat 0 at 2 s.",
			],
			[(d) => shiftBeats(d, -700), "Cue 1 (id c1) starts at -701.5 s, but must start at -600 s or later."],
			[(d) => splitSection(d, "s1", 32), "Section Verse runs from beat 0 to 32; it can't be split at beat 32."],
		];
		for (const [recipe, sentence] of refused) expect(() => applyEdit(show, recipe)).toThrow(sentence);
		expect(JSON.stringify(show)).toBe(before);
	});
});

describe("edits of cues", () => {
	it("number a new cue between its neighbours in time, defaults in place", () => {
		let id = "";
		const after = edit((draft) => {
			id = addCue(draft, { kind: "colour", at: 35, paint: { kind: "flat", colour: "#ffffff" } });
		});
		expect(after.cues.byId[id]).toMatchObject({
			id: "c6",
			number: "12.7",
			group: "all",
			fade: 0,
			length: 0,
			called: false,
		});
	});

	it("change one cue with one patch, and put a field back to its default", () => {
		const { patches } = applyEdit(show, (draft) => changeCue(draft, "c3", { length: 8 }));
		expect(patches.length).toBe(1);
		const dimmed = edit((draft) => changeCue(draft, "c3", { light: "dim" }));
		expect(dimmed.cues.byId.c3).toMatchObject({ light: "dim", length: 12 });
		const kept = edit((draft) => changeCue(draft, "c3", { light: undefined }), dimmed);
		expect(kept.cues.byId.c3).toMatchObject({ light: "keep" });
		expect(edit((draft) => changeCue(draft, "c5", { pinned: undefined })).cues.byId.c5.pinned).toBeUndefined();
	});

	it("keep a cue's number, id and kind", () => {
		const change = { number: "99" } as Parameters<typeof changeCue>[2];
		expect(() => applyEdit(show, (draft) => changeCue(draft, "c3", change))).toThrow(/keeps its number/);
		expect(edit((draft) => renumberCue(draft, "c3", "99")).cues.byId.c3.number).toBe("99");
	});

	it("move, copy and remove", () => {
		const moved = edit((draft) => moveCues(draft, ["c2", "c5"], 2));
		expect(moved.cues.byId.c2.at).toBe(2);
		expect(moved.cues.byId.c5.pinned).toBeCloseTo(22.3, 12);
		expect(edit((draft) => moveCue(draft, "c2", 7)).cues.byId.c2.at).toBe(7);
		const copied = edit((draft) => copyCues(draft, ["c2", "c3"], 60));
		expect(copied.cues.order.slice(5)).toEqual(["c6", "c7"]);
		expect(copied.cues.byId.c7).toMatchObject({ at: 80, formation: "f2", kind: "transition" });
		expect(edit((draft) => removeCues(draft, ["c1", "c4"])).cues.order).toEqual(["c2", "c3", "c5"]);
		expect(edit((draft) => setCues(draft, [show.cues.byId.c2])).cues.order).toEqual(["c2"]);
	});
});

describe("edits of formations", () => {
	it("take the first formation as the opening", () => {
		const after = edit((draft) => addFormation(draft, { shape: { kind: "ring", count: 5, radius: 4 } }), createShow(5));
		expect(after.opening).toBe("f1");
		expect(after.formations.byId.f1.place).toEqual({ position: [0, 0, 0], turn: 0, tilt: 0, scale: 1 });
	});

	it("cut colours and groups to fewer slots, and drop colours that would have to be guessed", () => {
		const points = (n: number) => Array.from({ length: n }, (_, i): [number, number, number] => [2 * i, 0, 30]);
		const fewer = edit((draft) => changeFormation(draft, "f2", { shape: { kind: "points", points: points(6) } }));
		expect(fewer.formations.byId.f2.colours?.length).toBe(6);
		expect(fewer.formations.byId.f2.groups).toEqual({ left: [0, 1, 2], right: [5] });
		const more = edit((draft) => changeFormation(draft, "f2", { shape: { kind: "points", points: points(9) } }));
		expect(more.formations.byId.f2.colours).toBeUndefined();
	});

	it("remove one that nothing needs", () => {
		const after = edit((draft) => {
			removeCues(draft, ["c3"]);
			removeFormation(draft, "f2");
		});
		expect(after.formations.order).toEqual(["f1"]);
	});
});

describe("edits of the grid", () => {
	const times = (of: Show) => toList(of.cues).map((cue) => cueTimes(cue, createBeatMap(of.grid)));
	const sectionTimes = (of: Show) =>
		of.sections.map(({ from, to }) => [from, to].map(createBeatMap(of.grid).secondsAt));

	it("double and halve the beats, and nothing leaves its place in the music", () => {
		const doubled = edit(doubleBeats);
		expect(doubled.grid.beats.length).toBe(200);
		expect(doubled.grid.bars.slice(0, 3).map(({ beat }) => beat)).toEqual([0, 4, 8]);
		expect(times(doubled)).toEqual(times(show));
		expect(sectionTimes(doubled)).toEqual(sectionTimes(show));
		const halved = edit(halveBeats);
		expect(halved.grid.beats.length).toBe(50);
		expect(halved.grid.bars.slice(0, 3)).toEqual([0, 4, 8].map((beat) => ({ beat, beatsPerBar: 4 })));
		expect(times(halved)).toEqual(times(show));
		expect(edit(halveBeats, doubled).grid.beats).toEqual(show.grid.beats);
	});

	it("halve from an odd first bar without losing its downbeat", () => {
		const odd = edit((draft) => shiftBars(draft, 1));
		const halved = edit(halveBeats, odd);
		expect(halved.grid.beats[0]).toBe(show.grid.beats[1]);
		expect(halved.grid.bars[0].beat).toBe(0);
		expect(times(halved)).toEqual(times(odd));
	});

	it("move the cues with their beats and leave pinned ones", () => {
		const after = edit((draft) => shiftBeats(draft, 0.25));
		const map = createBeatMap(after.grid);
		expect(cueTimes(after.cues.byId.c2, map).start).toBe(0.75);
		expect(cueTimes(after.cues.byId.c5, map).start).toBe(21.3);
		expect(after.grid.source).toBe("edited");
	});

	it("change the metre from a beat on, to the end or until the old bars go on", () => {
		const three = edit((draft) => setMetre(draft, 8, 3)).grid.bars;
		expect(three.slice(0, 5).map(({ beat }) => beat)).toEqual([0, 4, 8, 11, 14]);
		const patch = edit((draft) => setMetre(draft, 8, 3, 20)).grid.bars;
		expect(patch.slice(2, 8).map(({ beat }) => beat)).toEqual([8, 11, 14, 17, 20, 24]);
	});
});

describe("edits of sections", () => {
	it("rename, split, join and move borders", () => {
		expect(edit((draft) => renameSection(draft, "s1", "Intro")).sections[0].name).toBe("Intro");
		const split = edit((draft) => splitSection(draft, "s1", 16));
		expect(split.sections.map(({ id, from, to }) => [id, from, to])).toEqual([
			["s1", 0, 16],
			["s3", 16, 32],
			["s2", 32, 64],
		]);
		expect(edit((draft) => joinSections(draft, "s1"), split).sections.map(({ id }) => id)).toEqual(["s1", "s2"]);
		const moved = edit((draft) => moveSectionStart(draft, "s2", 28)).sections;
		expect([moved[0].to, moved[1].from]).toEqual([28, 28]);
		expect(edit((draft) => setSections(draft, [{ id: "s9", from: 0, to: 8 }])).sections[0].letter).toBe("");
	});
});
