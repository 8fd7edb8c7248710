import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { createStudio, type Studio } from "../../src/app/index.ts";
import { writeShow } from "../../src/core/show/index.ts";
import type { WorkerClient } from "../../src/workers/index.ts";
import { createNodeWorkers } from "../../src/workers/node-workers.ts";
import { smallShow } from "../core/flight/remedy/small-show.ts";
import { type BundledWorker, bundleWorker } from "../workers/bundle-worker.ts";
import { createFakeParts } from "./fake-parts.ts";

const ring = (id: string, x: number, radius = 8) => ({
	id,
	name: id,
	shape: { kind: "ring", count: 12, radius },
	place: { position: [x, 40, 40] },
});
const show = smallShow(
	12,
	[ring("a", -20), ring("b", 20), ring("c", -20, 9), ring("heap", 20, 2)],
	[
		{ at: 60, length: 15, formation: "b" },
		{ at: 100, length: 40, formation: "c" },
	],
);

describe("looking into a part of the show", () => {
	let bundled: BundledWorker;
	let workers: WorkerClient;
	let studio: Studio;
	const asked: string[] = [];
	beforeAll(async () => {
		bundled = await bundleWorker();
		workers = createNodeWorkers(bundled.entry, 2);
		const counting: WorkerClient = {
			...workers,
			run: (kind, ask, options) => {
				asked.push(kind);
				return workers.run(kind, ask, options);
			},
		};
		studio = createStudio(createFakeParts(counting).parts);
		await studio.start();
		await studio.commands.openFile(new File([writeShow(show)], "small.starstave.json"));
		await studio.settled();
	});
	afterAll(async () => {
		await studio.close();
		bundled.remove();
	});
	const state = () => studio.store.getState();
	const checkOf = (id: string) => state().check!.transitions.find((one) => one.id === id)!;
	const lookInto = async (kind: "leg" | "formation", id: string) => {
		studio.commands.lookInto({ kind, id });
		await studio.settled();
		return state().inquired!;
	};

	it("finds remedies and traces of a transition that doesn't fly", async () => {
		expect(checkOf("c1").verdicts).toContain("too-fast");
		const { remedies, traces, searching } = await lookInto("leg", "c1");
		expect(searching).toBe(false);
		expect(remedies.map(({ kind }) => kind)).toContain("nearer-to");
		expect(traces!.times[0]).toBeCloseTo(30, 9);
		expect(state().jobs).toEqual([]);
	});

	it("applies one as one step of undo, planning nothing again, and everything then flies", async () => {
		const remedy = state().inquired!.remedies.find(({ kind }) => kind === "nearer-to")!;
		const before = state().show;
		asked.length = 0;
		expect(studio.commands.applyRemedy(remedy)).toBe(true);
		expect(state().undo).toBe(remedy.change.replace(/\.$/, ""));
		await studio.settled();
		expect(checkOf("c1").verdicts).toContain("flies");
		expect(checkOf("c2").verdicts).toContain("flies");
		expect(asked).not.toContain("plan");
		expect(state().inquired!.remedies).toEqual([]);
		studio.commands.undo();
		expect(state().show).toEqual(before);
	});

	it("knows what it found before, and asks no worker again", async () => {
		await studio.settled();
		asked.length = 0;
		studio.commands.lookInto(null);
		expect(state().inquired).toBeNull();
		const { remedies } = await lookInto("leg", "c1");
		expect(remedies.length).toBeGreaterThan(0);
		expect(asked).not.toContain("remedies");
	});

	it("finds what mends a formation, and nothing for a leg that flies", async () => {
		expect((await lookInto("leg", "c2")).remedies).toEqual([]);
		const { remedies, traces } = await lookInto("formation", "heap");
		expect(remedies.map(({ kind }) => kind).sort()).toEqual(["enlarge", "part-slots"]);
		expect(traces).toBeNull();
	});

	it("ends when its part of the show is no longer asked about", async () => {
		studio.commands.moveCue("c1", 61);
		studio.commands.lookInto({ kind: "leg", id: "c1" });
		studio.commands.lookInto(null);
		await studio.settled();
		expect(state().inquired).toBeNull();
		expect(state().notices.filter(({ kind }) => kind === "error")).toEqual([]);
	});
});
