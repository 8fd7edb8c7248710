import Papa from "papaparse";
import { describe, expect, it } from "vitest";
import { cueListCsv, cueListJson, listCues } from "../../../src/core/handoff/cue-list.ts";
import { checkOf, show } from "./sample-check.ts";

const timecode = { rate: "25", start: "01:00:00:00" } as const;
const lines = listCues(show, checkOf(["flies"]), timecode);

describe("the cue list", () => {
	it("stands in the order of time, a pinned cue where it is pinned", () => {
		expect(lines.map(({ number }) => number)).toEqual(["1", "2", "12", "12.5", "13"]);
		expect(lines[4].start).toBe(21.3);
		expect(lines[0]).toMatchObject({ bar: 0, beat: 1, start: -1.5, startTimecode: "00:59:58:13", section: "" });
	});

	it("says bar and beat, section, timecode, what is set, and how the transition is judged", () => {
		expect(lines[2]).toMatchObject({
			kind: "transition",
			section: "Verse",
			bar: 6,
			beat: 1,
			start: 10.5,
			end: 16.5,
			startTimecode: "01:00:10:13",
			endTimecode: "01:00:16:13",
			values: "to Heart, s-curve, light keep",
			verdict: "flies",
			slack: 1.75,
		});
		expect(lines[3]).toMatchObject({
			section: "Chorus",
			called: true,
			group: "left",
			values: "picture",
			verdict: null,
		});
		expect(lines[1].values).toBe("flat #3366ff, fade 2 beats");
		expect(lines[0].values).toBe("0 %");
		expect(lines[4].values).toBe("follows loudness from 20 % to 100 %");
	});

	it("comes back from its CSV through a parser of RFC 4180, with what a spreadsheet would run kept from running", () => {
		const { data, errors } = Papa.parse<Record<string, string>>(cueListCsv(lines, "7K3Q-91XB"), {
			header: true,
			skipEmptyLines: true,
		});
		expect(errors).toEqual([]);
		expect(Object.keys(data[0])).toEqual([
			"number",
			"kind",
			"called",
			"name",
			"section",
			"bar",
			"beat",
			"start_s",
			"end_s",
			"start_timecode",
			"end_timecode",
			"group",
			"values",
			"verdict",
			"slack_s",
			"note",
			"revision",
		]);
		expect(data.length).toBe(5);
		expect(data[2]).toMatchObject({ name: "'=HYPERLINK(1)", note: 'watch the "crane",\nthen go', slack_s: "1.75" });
		expect(data[0].start_s).toBe("-1.5");
		expect(data.every(({ revision }) => revision === "7K3Q-91XB")).toBe(true);
	});

	it("holds each cue whole in its JSON", () => {
		const list = JSON.parse(cueListJson(lines, show, "7K3Q-91XB", timecode));
		expect(list).toMatchObject({ format: "starstave-cue-list", revision: "7K3Q-91XB", timecode });
		expect(list.cues[2].cue).toEqual(show.cues.byId.c3);
	});
});
