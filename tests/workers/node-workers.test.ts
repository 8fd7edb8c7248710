import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { decodeAudio } from "../../src/core/decode/index.ts";
import { assembleFlight, flyShow, legProblems, planLeg } from "../../src/core/flight/index.ts";
import { fleetSlotsOf, takeoffSlots } from "../../src/core/formation/index.ts";
import { compileLight, findFlashes } from "../../src/core/light/index.ts";
import { analyse } from "../../src/core/music/index.ts";
import { readShow, writeShow } from "../../src/core/show/index.ts";
import { StarstaveError } from "../../src/core/units/index.ts";
import type { WorkerClient } from "../../src/workers/index.ts";
import { createNodeWorkers } from "../../src/workers/node-workers.ts";
import { sampleText } from "../core/show/sample-show.ts";
import { makeTrack } from "../e2e/make-track.ts";
import { type BundledWorker, bundleWorker } from "./bundle-worker.ts";

const show = readShow(sampleText());
const slots = fleetSlotsOf(show);
const ground = takeoffSlots(show);

describe("a worker, held against the direct call", () => {
	let bundled: BundledWorker;
	let workers: WorkerClient;
	beforeAll(async () => {
		bundled = await bundleWorker();
		workers = createNodeWorkers(bundled.entry, 2);
	});
	afterAll(() => {
		workers.close();
		bundled.remove();
	});

	it("hears the same in a soundtrack, to the last bit", async () => {
		const bytes = makeTrack(128, 5).wav;
		const stages = new Set<string>();
		const answer = await workers.run(
			"analyse",
			{ name: "made.wav", bytes, samples: null, known: null },
			{ onProgress: (_share, stage) => void stages.add(stage) },
		);
		const samples = await decodeAudio(bytes, "made.wav");
		expect(answer.samples).toEqual(samples);
		expect(answer.analysis).toEqual(analyse(samples));
		expect(stages.size).toBeGreaterThan(1);
		// The bytes were copied, not taken away: they are still to be kept and saved.
		expect(bytes.length).toBeGreaterThan(0);
	});

	it("takes a kept analysis of the same soundtrack instead of listening again, and of no other", async () => {
		const bytes = makeTrack(128, 4).wav;
		const ask = { name: "made.wav", bytes, samples: null };
		const first = await workers.run("analyse", { ...ask, known: null });
		const marked = { ...first.analysis, notes: ["kept"] };
		const { sha256 } = first.soundtrack;
		const again = await workers.run("analyse", { ...ask, known: { sha256, analysis: marked } });
		expect(again.analysis.notes).toEqual(["kept"]);
		const other = await workers.run("analyse", { ...ask, known: { sha256: "0".repeat(64), analysis: marked } });
		expect(other.analysis).toEqual(first.analysis);
		const older = await workers.run("analyse", { ...ask, known: { sha256, analysis: { ...marked, version: -1 } } });
		expect(older.analysis).toEqual(first.analysis);
	});

	it("lays, plans, assembles and proves the same show the same way", async () => {
		const laid = await workers.run("lay", { show });
		expect(laid.slots).toEqual(slots);
		expect(laid.ground).toEqual(ground);
		expect(laid.problems).toEqual(legProblems(show, slots, ground));
		const plans = new Map(
			await Promise.all(
				laid.problems.map(async (problem) => [problem.key, await workers.run("plan", { problem })] as const),
			),
		);
		for (const problem of laid.problems) expect(plans.get(problem.key)).toEqual(planLeg(problem));
		const answer = await workers.run("assemble", { show, slots, ground, plans });
		const all = new Map([...plans, ...answer.plans]);
		const direct = flyShow(show, slots, ground);
		expect(all).toEqual(direct.plans);
		const legs = answer.flight.legs.map((leg, index) => ({ ...leg, plan: all.get(answer.keys[index])! }));
		const flight = { ...answer.flight, legs };
		expect(flight).toEqual(assembleFlight(show, slots, ground, all));
		// Twice: the second time the worker knows the proofs.
		for (let turn = 0; turn < 2; turn++) {
			const { check, flashes } = await workers.run("check", { show, slots, flight, keys: answer.keys, curves: null });
			expect(check).toEqual(direct.check);
			const light = compileLight(show, flight.stays, slots, []);
			expect(flashes).toEqual(findFlashes(light, flight.begins, flight.ends));
		}
	});

	it("writes and reads a show, plain and with its soundtrack", async () => {
		const plain = await workers.run("write", { show, soundtrack: null });
		expect(new TextDecoder().decode(plain)).toBe(writeShow(show));
		const soundtrack = { name: "harbour.wav", bytes: new Uint8Array([1, 2, 3]) };
		const zipped = await workers.run("write", { show, soundtrack });
		expect(await workers.run("read", { bytes: zipped })).toEqual({ show, soundtrack });
	});

	it("brings errors across as what they are", async () => {
		const bytes = new TextEncoder().encode("not audio at all");
		const failed = workers.run("analyse", { name: "letter.txt", bytes, samples: null, known: null });
		await expect(failed).rejects.toBeInstanceOf(StarstaveError);
		await expect(failed).rejects.toMatchObject({ area: "soundtrack", message: expect.stringContaining("letter.txt") });
		await expect(workers.run("read", { bytes: new TextEncoder().encode("{}") })).rejects.toMatchObject({
			area: "show",
		});
	});

	it("lets go of a long job when it is cancelled, and goes on with the next", async () => {
		const controller = new AbortController();
		const long = workers.run(
			"analyse",
			{ name: "long.wav", bytes: makeTrack(100, 20).wav, samples: null, known: null },
			{ signal: controller.signal, onProgress: () => controller.abort() },
		);
		await expect(long).rejects.toMatchObject({ name: "AbortError" });
		expect((await workers.run("lay", { show })).slots).toEqual(slots);
	});
});
