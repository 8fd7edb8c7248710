import { describe, expect, it } from "vitest";
import { createStudio, type Studio } from "../../src/app/index.ts";
import { readShow, type Show, writeShow } from "../../src/core/show/index.ts";
import { StarstaveError } from "../../src/core/units/index.ts";
import { sampleText } from "../core/show/sample-show.ts";
import { createDirectClient } from "../workers/direct-client.ts";
import { createFakeParts, createMemoryAutosave } from "./fake-parts.ts";

const showFile = (change?: Parameters<typeof sampleText>[0], name = "harbour.starstave.json") =>
	new File([sampleText(change)], name);

async function openStudio(
	memory = createMemoryAutosave(),
	change: Partial<ReturnType<typeof createFakeParts>["parts"]> = {},
) {
	const workers = createDirectClient();
	const fake = createFakeParts(workers, memory);
	const studio = createStudio({ ...fake.parts, ...change });
	await studio.start();
	return { ...fake, studio, memory, workers };
}
const noticesOf = (studio: Studio) => studio.store.getState().notices.map(({ text }) => text);

describe("the autosave", () => {
	it("keeps every edit, and brings the show back as it was left", async () => {
		const { studio, memory } = await openStudio();
		await studio.commands.openFile(showFile());
		studio.commands.setTitle("Harbour, second night");
		studio.commands.moveCue("c3", 21);
		await studio.close();
		const again = await openStudio(memory);
		const { show, unsaved, fileName } = again.studio.store.getState();
		expect(show).toMatchObject({ title: "Harbour, second night" });
		expect(show!.cues.byId.c3.at).toBe(21);
		expect({ unsaved, fileName }).toEqual({ unsaved: true, fileName: "harbour.starstave.json" });
		expect(noticesOf(again.studio)).toEqual([expect.stringContaining("harbour.wav")]);
		await again.studio.close();
	});

	it("keeps unknown keys, as the file does", async () => {
		const { studio, memory } = await openStudio();
		await studio.commands.openFile(showFile((file) => Object.assign(file, { crew: ["Ada"] })));
		await studio.close();
		const again = await openStudio(memory);
		expect(again.studio.store.getState().show).toMatchObject({ crew: ["Ada"] });
		await again.studio.close();
	});

	it("sets the show aside that another takes the place of, and brings it back", async () => {
		const { studio, memory } = await openStudio();
		await studio.commands.openFile(showFile());
		studio.commands.setTitle("First");
		await studio.commands.openFile(showFile((file) => Object.assign(file, { title: "Second" })));
		expect(studio.store.getState()).toMatchObject({ show: { title: "Second" }, previous: "First", undo: null });
		await studio.commands.bringBackPrevious();
		expect(studio.store.getState()).toMatchObject({ show: { title: "First" }, previous: "Second", unsaved: true });
		await studio.flush();
		expect(memory.shows.get("current")?.title).toBe("First");
		await studio.close();
	});

	it("reads nothing that a newer program kept, and never writes over it", async () => {
		const memory = createMemoryAutosave();
		const newer = { format: "starstave-show", version: 99, anything: true };
		memory.shows.set("current", {
			content: newer,
			title: "From later",
			fileName: null,
			unsaved: true,
			soundtrack: null,
		});
		const { studio } = await openStudio(memory);
		expect(studio.store.getState().show).toBeNull();
		expect(noticesOf(studio)[0]).toMatch(/newer version/);
		await studio.commands.openFile(showFile());
		studio.commands.setTitle("Worked on all the same");
		await studio.close();
		expect(memory.shows.get("current")?.content).toEqual(newer);
	});

	it("leaves what it can't read where it is, and says so", async () => {
		const memory = createMemoryAutosave();
		const broken = { format: "starstave-show", version: 1, fleet: { count: "many" } };
		memory.shows.set("current", { content: broken, title: "Broken", fileName: null, unsaved: true, soundtrack: null });
		const { studio } = await openStudio(memory);
		expect(noticesOf(studio)[0]).toMatch(/can't be read.*fleet/i);
		await studio.commands.openFile(showFile());
		await studio.close();
		expect(memory.shows.get("current")?.content).toEqual(broken);
	});

	it("goes on without where the browser keeps nothing, and says so once", async () => {
		const openAutosave = async () => {
			throw new StarstaveError("storage", "The browser keeps nothing.");
		};
		const { studio } = await openStudio(undefined, { openAutosave });
		await studio.commands.openFile(showFile());
		studio.commands.setTitle("Still works");
		await studio.flush();
		expect(studio.store.getState().show!.title).toBe("Still works");
		expect(noticesOf(studio).filter((text) => text.includes("keeps nothing")).length).toBe(1);
		await studio.close();
	});

	it("says so where there is no room left, and keeps trying", async () => {
		const memory = createMemoryAutosave();
		let full = true;
		const { writeShow: write } = memory.autosave;
		const autosave = {
			...memory.autosave,
			writeShow: async (...args: Parameters<typeof write>) => {
				if (full) throw new StarstaveError("storage", "There is no room left.");
				await write(...args);
			},
		};
		const { studio } = await openStudio(memory, { openAutosave: async () => autosave });
		await studio.commands.openFile(showFile());
		await studio.flush();
		expect(noticesOf(studio)).toContain("There is no room left.");
		full = false;
		studio.commands.setTitle("Room again");
		await studio.flush();
		expect(memory.shows.get("current")?.title).toBe("Room again");
		await studio.close();
	});
});

describe("two tabs", () => {
	it("let the second look and not write, until the first is closed", async () => {
		const memory = createMemoryAutosave();
		const first = await openStudio(memory);
		await first.studio.commands.openFile(showFile());
		await first.studio.flush();
		let free = () => {};
		const later = new Promise<void>((resolve) => {
			free = resolve;
		});
		const second = await openStudio(memory, { takeLease: async () => ({ held: false, later, release: () => {} }) });
		const state = () => second.studio.store.getState();
		expect(state().show!.title).toBe("Harbour night");
		expect(state().readOnly).toMatch(/another tab/);
		const before = state().show;
		expect(second.studio.commands.setTitle("Mine")).toBe(false);
		expect(second.studio.drag("Move")).toBeNull();
		expect(second.studio.commands.undo()).toBe(false);
		expect(await second.studio.commands.openFile(showFile())).toBe(false);
		expect(state().show).toBe(before);
		await second.studio.flush();
		expect(memory.shows.get("current")?.title).toBe("Harbour night");
		first.studio.commands.setTitle("Worked on in the first tab");
		await first.studio.close();
		free();
		await expect.poll(() => state().show!.title).toBe("Worked on in the first tab");
		expect(state().readOnly).toBeNull();
		expect(second.studio.commands.setTitle("Now mine")).toBe(true);
		await second.studio.close();
	});
});

describe("opening", () => {
	it("tells a show from a soundtrack by its content, and says what is wrong with what is neither", async () => {
		const { studio } = await openStudio();
		await studio.commands.openFile(showFile(undefined, "show.mp3"));
		expect(studio.store.getState().show!.title).toBe("Harbour night");
		const before = studio.store.getState().show;
		expect(await studio.commands.openFile(new File(["Dear client"], "letter.wav"))).toBe(false);
		expect(await studio.commands.openFile(new File([""], "empty.mp3"))).toBe(false);
		expect(await studio.commands.openFile(showFile((file) => Object.assign(file, { version: 2 }), "later.json"))).toBe(
			false,
		);
		expect(noticesOf(studio).filter((text) => /letter\.wav|empty\.mp3|newer program/.test(text)).length).toBe(3);
		expect(studio.store.getState().show).toBe(before);
		await studio.close();
	});

	it("makes a formation of a drawing or of points, one step of undo", async () => {
		const { studio } = await openStudio();
		await studio.commands.openFile(showFile());
		const before = studio.store.getState().show!.formations.order.length;
		const drawing =
			'<svg xmlns="http://www.w3.org/2000/svg"><circle cx="5" cy="5" r="4" stroke="#ff0000" fill="none"/></svg>';
		expect(await studio.commands.openFile(new File([drawing], "moon.svg"))).toBe(true);
		expect(await studio.commands.openFile(new File(["x,y,z\n0,0,10\n3,0,10\n"], "pair.csv"))).toBe(true);
		const { formations } = studio.store.getState().show!;
		expect(formations.order.slice(before).map((id) => formations.byId[id].name)).toEqual(["moon", "pair"]);
		expect(noticesOf(studio).some((text) => /^pair is 3\.0 m wide/.test(text))).toBe(true);
		studio.commands.undo();
		studio.commands.undo();
		expect(studio.store.getState().show!.formations.order.length).toBe(before);
		expect(await studio.commands.addFormationFrom(new File(["a,b,c\nx,y,z"], "words.csv"))).toBeNull();
		expect(noticesOf(studio).some((text) => text.includes("words.csv"))).toBe(true);
		await studio.close();
	});

	it("says what stands in the way of flying, and forgets it when it is put right", async () => {
		const { studio } = await openStudio();
		await studio.commands.openFile(showFile());
		await studio.settled();
		expect(studio.store.getState().check).not.toBeNull();
		studio.commands.setFleet({ count: 5 });
		await studio.settled();
		expect(noticesOf(studio).some((text) => /12/.test(text) && /5/.test(text))).toBe(true);
		expect(studio.store.getState().unchecked.size).toBeGreaterThan(0);
		studio.commands.undo();
		await studio.settled();
		expect(studio.store.getState().notices.filter(({ kind }) => kind === "error")).toEqual([]);
		expect(studio.store.getState().unchecked.size).toBe(0);
		await studio.close();
	});

	it("never plans for a show that has been replaced while it was planned", async () => {
		const { studio } = await openStudio();
		await studio.commands.openFile(showFile());
		await studio.commands.openFile(showFile((file) => Object.assign(file, { title: "Next", fleet: { count: 14 } })));
		await studio.settled();
		const state = studio.store.getState();
		expect(state.flight!.drones).toBe(14);
		expect(state.unchecked.size).toBe(0);
		expect(noticesOf(studio).some((text) => text.includes("cancelled"))).toBe(false);
		await studio.close();
	});

	it("saves nothing that would not be read again", async () => {
		const { studio, handed } = await openStudio();
		expect(await studio.commands.save()).toBe(false);
		await studio.commands.openFile(showFile());
		studio.commands.setTitle('A/B: "night"?');
		await studio.commands.save();
		const file = handed.at(-1)!;
		expect(file.name).toBe("harbour.starstave.json");
		const back: Show = readShow(new TextDecoder().decode(file.bytes));
		expect(writeShow(back)).toBe(writeShow(studio.store.getState().show!));
		await studio.close();
	});
});
