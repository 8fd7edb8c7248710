import { describe, expect, it } from "vitest";
import { createStudio } from "../../src/app/index.ts";
import { sampleText } from "../core/show/sample-show.ts";
import { createDirectClient } from "../workers/direct-client.ts";
import { createFakeParts, createMemoryAutosave } from "./fake-parts.ts";

describe("the demo that comes in by itself at the start", () => {
	it("does not take the place of what the user opens meanwhile", async () => {
		let arrive: () => void = () => {};
		const late = new Promise<void>((done) => {
			arrive = done;
		});
		const { parts } = createFakeParts(createDirectClient(), createMemoryAutosave());
		const demo = {
			name: "demo.starstave.json",
			bytes: new TextEncoder().encode(sampleText((file) => Object.assign(file, { title: "The demo" }))),
		};
		const studio = createStudio({
			...parts,
			fetchDemo: async () => {
				await late;
				return { show: demo, soundtrack: null };
			},
		});
		const started = studio.start();
		while (!studio.store.getState().started) await new Promise((done) => setTimeout(done, 5));
		await studio.commands.openFile(
			new File([sampleText((file) => Object.assign(file, { title: "My own" }))], "own.starstave.json"),
		);
		arrive();
		await started;
		expect(studio.store.getState().show?.title).toBe("My own");
		await studio.close();
	});

	it("comes in where nothing else was asked for", async () => {
		const { parts } = createFakeParts(createDirectClient(), createMemoryAutosave());
		const demo = {
			name: "demo.starstave.json",
			bytes: new TextEncoder().encode(sampleText((file) => Object.assign(file, { title: "The demo" }))),
		};
		const studio = createStudio({ ...parts, fetchDemo: async () => ({ show: demo, soundtrack: null }) });
		await studio.start();
		expect(studio.store.getState().show?.title).toBe("The demo");
		await studio.close();
	});
});
