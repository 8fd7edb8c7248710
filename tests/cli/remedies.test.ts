import { writeFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { applyRemedy } from "../../src/core/flight/index.ts";
import { applyEdit, writeShow } from "../../src/core/show/index.ts";
import { smallShow } from "../core/flight/remedy/small-show.ts";
import { buildStarstave } from "./run-starstave.ts";

const { run, path } = buildStarstave();
const ring = (id: string, x: number, radius = 8) => ({
	id,
	shape: { kind: "ring", count: 12, radius },
	place: { position: [x, 40, 40] },
});
const show = smallShow(
	12,
	[ring("near", -20), ring("far", 20), ring("heap", 20, 2)],
	[{ at: 60, length: 15, formation: "far" }],
);

describe("check of a show that doesn't fly", () => {
	it("names what would make it fly, as steps that do when they are applied, and answers 2", () => {
		writeFileSync(path("short.starstave.json"), writeShow(show));
		const first = run("check", "short.starstave.json", "--json", "-");
		expect(first.code).toBe(2);
		const { transitions, formationRemedies } = JSON.parse(first.stdout);
		const kinds = transitions[0].remedies.map(({ kind }: { kind: string }) => kind);
		expect(kinds).toContain("depart-earlier");
		expect(kinds).toContain("nearer-to");
		expect(formationRemedies[0].id).toBe("heap");
		const losses = transitions[0].remedies.map(({ loss }: { loss: number }) => loss);
		expect(losses).toEqual([...losses].sort((a, b) => a - b));
		for (const remedy of transitions[0].remedies) {
			expect(Object.keys(remedy)).toEqual(["kind", "change", "cost", "loss", "steps"]);
			const mended = applyEdit(show, (draft) => applyRemedy(draft, remedy)).show;
			writeFileSync(path("mended.starstave.json"), writeShow(mended));
			expect(run("check", "mended.starstave.json").code, remedy.change).toBe(0);
		}
	});

	it("prints them under what they are for", () => {
		const { code, stdout } = run("check", "short.starstave.json");
		expect(code).toBe(2);
		expect(stdout).toMatch(/Cue 1: too-fast.*\n {2}\S.*\n/);
		expect(stdout).toMatch(/Formation heap: too-close.*\n {2}Enlarge heap to/);
	});
});
