import { describe, expect, it } from "vitest";
import { readShow, type Show, writeShow } from "../../../src/core/show/index.ts";
import { StarstaveError } from "../../../src/core/units/index.ts";
import { sampleFile, sampleText } from "./sample-show.ts";

function refusal(text: string): string {
	try {
		readShow(text);
	} catch (error) {
		expect(error).toBeInstanceOf(StarstaveError);
		const { message } = error as StarstaveError;
		// One sentence: a line that starts with a capital letter and ends with its only full stop.
		expect(message).toMatch(/^\P{Ll}[^\n]*\.$/u);
		return message;
	}
	throw new Error("was taken, but should have been refused");
}

describe("reading a show", () => {
	it("fills in every default", () => {
		const show = readShow('{"format":"starstave-show","version":1,"fleet":{"count":3}}');
		expect(show.fleet.limits).toEqual({
			horizontal: 6,
			climb: 3,
			descent: 2,
			acceleration: 3,
			jerk: 10,
			spacing: 1.5,
			downwash: 2,
			endurance: 900,
			reserve: 0.25,
		});
		expect(show.venue.seat).toEqual([0, -60, 1.6]);
		expect(show.opening).toBeNull();
		expect(show.cues).toEqual({ byId: {}, order: [] });
	});

	it("holds cues, formations and groups by id with their order", () => {
		const show = readShow(sampleText());
		expect(show.cues.order).toEqual(["c1", "c2", "c3", "c4", "c5"]);
		expect(show.cues.byId.c3.number).toBe("12");
		expect(show.formations.byId.f2.name).toBe("Heart");
		expect(show.groups.byId.g1.drones).toEqual([0, 11]);
	});

	it("gives back what was written, in memory and on file", () => {
		const show = readShow(sampleText());
		const text = writeShow(show);
		expect(readShow(text)).toEqual(show);
		expect(writeShow(readShow(text))).toBe(text);
		expect(text.endsWith("\n")).toBe(true);
	});

	it("keeps unknown keys wherever they stand, and drops those that would change an object's nature", () => {
		const text = sampleText((file) => {
			file.rig = { crane: 3, "naïve key": [1, null, "x"] };
			Object.assign(file.cues[2], { desk: { page: 4 } });
			Object.assign(file.fleet, { radio: "868 MHz" });
		}).replace('"crane":3', '"crane":3,"__proto__":{"evil":true},"constructor":7');
		const back = JSON.parse(writeShow(readShow(text)));
		expect(back.rig).toEqual({ crane: 3, "naïve key": [1, null, "x"] });
		expect(Object.keys(back.rig)).toEqual(["crane", "naïve key"]);
		expect(back.cues[2].desk).toEqual({ page: 4 });
		expect(back.fleet.radio).toBe("868 MHz");
		expect(({} as Record<string, unknown>).evil).toBeUndefined();
	});

	it("writes equal shows as equal bytes, whatever the order of their keys", () => {
		const show = readShow(sampleText());
		const turned = Object.fromEntries(Object.entries(show).reverse()) as unknown as Show;
		expect(writeShow(turned)).toBe(writeShow(show));
	});

	it("takes a byte order mark and refuses a show that it could not read back", () => {
		expect(readShow(`\uFEFF${sampleText()}`).title).toBe("Harbour night");
		const show = readShow(sampleText());
		const broken = { ...show, grid: { ...show.grid, beats: [1, Number.NaN] } };
		expect(() => writeShow(broken)).toThrow(/grid\.beats is NaN, but must be a/);
	});
});

describe("a show that can't be read says what, where and what would be right", () => {
	const cases: readonly [string, string, string][] = [
		["nothing at all", "  ", "The show file is empty; open a file that was saved as a show."],
		["a list", "[]", "The file holds no show; open a *.starstave.json or *.starstave file."],
		[
			"another format",
			'{"format":"score"}',
			'The file holds no show: format is "score", but must be "starstave-show".',
		],
		[
			"version 2",
			sampleText((file) => {
				file.version = 2;
			}),
			"The show was saved by a newer program: its version is 2 and this one reads up to 1; update the program (the file is left as it is).",
		],
		[
			"no fleet",
			sampleText((file) => {
				Reflect.deleteProperty(file, "fleet");
			}),
			"Fleet is missing, but must be given.",
		],
		[
			"NaN in a cue",
			sampleText().replace('"at":32,', '"at":NaN,'),
			"Cue 12.5 (id c4): at is NaN, but must be a finite number.",
		],
		[
			"-Infinity in a point",
			sampleText().replace("[6,0,22.125]", "[6,-Infinity,22.125]"),
			"Formation Heart (id f2): item 2 of item 3 of shape.points is -Infinity, but must be a finite number.",
		],
		[
			"a number too large for a float",
			sampleText().replace('"at":32,', '"at":1e999,'),
			"Cue 12.5 (id c4): at is Infinity, but must be a finite number.",
		],
		[
			"words for a number",
			sampleText((file) => {
				Object.assign(file.cues[3], { at: "bar 9" });
			}),
			'Cue 12.5 (id c4): at is "bar 9", but must be a number.',
		],
		[
			"two cues of one id",
			sampleText((file) => {
				file.cues[4].id = "c2";
			}),
			"Cue 5 of the list has the id c2 that cue 2 has; every cue needs its own.",
		],
		[
			"two formations of one id",
			sampleText((file) => {
				file.formations[1].id = "f1";
			}),
			"Formation 2 of the list has the id f1 that formation 1 has; every formation needs its own.",
		],
		[
			"an unknown formation in a cue",
			sampleText((file) => {
				Object.assign(file.cues[2], { formation: "f9" });
			}),
			"Cue 12 (id c3) goes to formation f9, but the show has only f1, f2.",
		],
		[
			"an unknown formation as the opening",
			sampleText((file) => {
				file.opening = "f9";
			}),
			"Opening is formation f9, but the show has only f1, f2.",
		],
		[
			"a kind that is none",
			sampleText((file) => {
				file.cues[2].kind = "laser";
			}),
			'Cue 12 (id c3): kind is "laser", but must be one of transition, colour, intensity.',
		],
		[
			"beats that don't rise",
			sampleText((file) => {
				file.grid.beats[7] = file.grid.beats[6];
			}),
			"Beat 7 of the grid stands at 3.5 s, but must come after beat 6 at 3.5 s.",
		],
		[
			"a bar past the beats",
			sampleText((file) => {
				file.grid.bars[24].beat = 100;
			}),
			"Bar 25 of the grid starts on beat 100, but the grid has 100 beats, counted from 0.",
		],
		[
			"a slot out of range",
			sampleText((file) => {
				file.formations[1].groups?.left.push(8);
			}),
			"Formation Heart (id f2): group left names slot 8, but its 8 slots count from 0 to 7.",
		],
		[
			"too few colours",
			sampleText((file) => {
				file.formations[1].colours?.pop();
			}),
			"Formation Heart (id f2) has 7 colours for 8 slots; it needs one for each slot, or none.",
		],
		[
			"a drone out of range",
			sampleText((file) => {
				file.groups[0].drones.push(12);
			}),
			"Group new motors (id g1) names drone 12, but the fleet has 12 drones, counted from 0.",
		],
		[
			"a half drone",
			sampleText((file) => {
				file.fleet.count = 12.5;
			}),
			"Fleet.count is 12.5, but must be a whole number.",
		],
		[
			"a section that ends before it starts",
			sampleText((file) => {
				file.sections[1].to = 30;
			}),
			"Section Chorus (id s2) runs from beat 32 to beat 30, but must end after it starts.",
		],
		[
			"a path for a base name",
			sampleText((file) => {
				file.soundtrack.file = "../harbour.wav";
			}),
			'Soundtrack.file is "../harbour.wav", but must be a file\'s base name, without folders.',
		],
		[
			"a cue long after the music",
			sampleText((file) => {
				file.cues[2].at = 2000;
			}),
			"Cue 12 (id c3) ends at 1006.5 s, but must end by 660 s, 600 s past the soundtrack's end.",
		],
		[
			"a cue long before the music",
			sampleText((file) => {
				file.cues[0].at = -2000;
			}),
			"Cue 1 (id c1) starts at -999.5 s, but must start at -600 s or later.",
		],
		[
			"a point of four numbers",
			sampleText((file) => {
				file.formations[1].shape.points?.[1].push(4);
			}),
			"Formation Heart (id f2): item 4 of item 2 of shape.points is 4, but must be three numbers.",
		],
		[
			"an id that every object answers to",
			sampleText((file) => {
				file.cues[0].id = "toString";
			}),
			'Cue 1 (id toString): id is "toString", but must not be a name that JavaScript objects reserve.',
		],
	];
	it.each(cases)("%s", (_name, text, sentence) => {
		expect(refusal(text)).toBe(sentence);
	});

	it("names the line of what is no JSON, and calls a cut file by its name", () => {
		expect(refusal('{\n"format": "starstave-show",\n"version" 1\n}')).toMatch(/line 3, column 11/);
		expect(refusal(sampleText().slice(0, 500))).toMatch(/JSON/);
		expect(refusal("[".repeat(100_000))).toMatch(/JSON/);
		expect(refusal(`${"[".repeat(2000)}${"]".repeat(2000)}`)).toMatch(/nested more than 64 deep/);
	});

	it("refuses every file of which one value is replaced by null, or takes it with its meaning kept", () => {
		const refused: string[] = [];
		for (const key of Object.keys(sampleFile())) {
			const text = sampleText((file) => {
				file[key] = null;
			});
			try {
				readShow(text);
			} catch (error) {
				expect(error).toBeInstanceOf(StarstaveError);
				refused.push(key);
			}
		}
		// What may be null by the format: no soundtrack, no opening (its formations stay).
		expect(Object.keys(sampleFile()).filter((key) => !refused.includes(key))).toEqual(["soundtrack", "opening"]);
	});
});
