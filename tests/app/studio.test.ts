import { strFromU8, unzipSync } from "fflate";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { createStudio, type Studio } from "../../src/app/index.ts";
import { readShow, type TransitionCue } from "../../src/core/show/index.ts";
import type { WorkerClient } from "../../src/workers/index.ts";
import { createNodeWorkers } from "../../src/workers/node-workers.ts";
import { makeTrack } from "../e2e/make-track.ts";
import { type BundledWorker, bundleWorker } from "../workers/bundle-worker.ts";
import { createFakeParts, createMemoryAutosave } from "./fake-parts.ts";

const track = makeTrack(120, 24);
const trackFile = () => new File([track.wav as Uint8Array<ArrayBuffer>], "harbour.wav");

describe("the studio, driven whole without a browser", () => {
	let bundled: BundledWorker;
	let workers: WorkerClient;
	const memory = createMemoryAutosave();
	let studio: Studio;
	let fake: ReturnType<typeof createFakeParts>;
	beforeAll(async () => {
		bundled = await bundleWorker();
		workers = createNodeWorkers(bundled.entry, 2);
		fake = createFakeParts(workers, memory);
		studio = createStudio(fake.parts);
		await studio.start();
	});
	afterAll(async () => {
		await studio.close();
		bundled.remove();
	});
	const state = () => studio.store.getState();
	const transitions = () =>
		Object.values(state().show!.cues.byId)
			.filter((cue): cue is TransitionCue => cue.kind === "transition")
			.sort((a, b) => a.at - b.at);
	const checkOf = (id: string) => state().check!.transitions.find((one) => one.id === id)!;

	it("begins empty where nothing was kept and no demo is shipped", () => {
		expect(state()).toMatchObject({ started: true, show: null, jobs: [], notices: [] });
	});

	it("opens a soundtrack: a show with its grid and sections, ready to be played", async () => {
		const jobs = new Set<string>();
		const stop = studio.store.subscribe(({ jobs: now }) => {
			for (const job of now) jobs.add(job.name);
		});
		expect(await studio.commands.openFile(trackFile())).toBe(true);
		stop();
		expect(jobs).toContain("Listening to the soundtrack");
		const { show, analysis, audioReady } = state();
		expect(show!.title).toBe("harbour");
		expect(show!.soundtrack).toMatchObject({ file: "harbour.wav", sampleRate: 44100, channels: 1 });
		expect(show!.soundtrack!.duration).toBeCloseTo(track.duration, 3);
		expect(show!.grid.beats.length).toBeGreaterThan(80);
		expect(show!.sections.length).toBeGreaterThan(1);
		expect(analysis!.tempo.bpm).toBeCloseTo(120, 0);
		expect(audioReady).toBe(true);
		expect(fake.told.seconds).toBeCloseTo(track.duration, 3);
		expect(fake.told.beats).toBe(show!.grid.beats.length);
		expect(state().notices.filter(({ kind }) => kind === "error")).toEqual([]);
	});

	it("makes a rough cut that flies as it stands, as one step of undo", async () => {
		expect(await studio.commands.makeRoughCut({ drones: 40 })).toBe(true);
		expect(state().undo).toBe("Rough cut");
		await studio.settled();
		expect(state().show!.fleet.count).toBe(40);
		expect(transitions().length).toBeGreaterThan(0);
		expect(
			state()
				.check!.transitions.map(({ id }) => id)
				.sort(),
		).toEqual(
			transitions()
				.map(({ id }) => id)
				.sort(),
		);
		expect(state().check!.flies).toBe(true);
		expect(state().unchecked.size).toBe(0);
		expect(state().flight!.drones).toBe(40);
		expect(state().light).not.toBeNull();
		expect(fake.told.span[0]).toBe(state().flight!.begins);
	});

	it("works out falls, wakes and lag after the proof, and again where the wind changes, which changes no verdict", async () => {
		const calm = state().care!.fallZone!;
		expect(state().care!.asFlown.legs).toHaveLength(transitions().length);
		const undone = state().undo;
		expect(studio.commands.setVenue({ wind: 9 })).toBe(true);
		expect(state().unchecked.size).toBe(0);
		await studio.settled();
		expect(state().check!.flies).toBe(true);
		expect(state().care!.fallZone!.farthest.distance).toBeGreaterThan(calm.farthest.distance + 5);
		studio.commands.undo();
		await studio.settled();
		expect(state().undo).toBe(undone);
		expect(state().care!.fallZone).toEqual(calm);
	});

	it("compares needed with available time at once while a transition is dragged, and says too fast", async () => {
		const cue = transitions()[0];
		const before = checkOf(cue.id);
		const drag = studio.dragCue(cue.id, "arrives")!;
		for (const length of [cue.length, cue.length / 2, 0.5]) {
			expect(drag.update(cue.at + length)).toBeNull();
			const now = checkOf(cue.id);
			const { beats } = state().show!.grid;
			expect(now.needed).toBe(before.needed);
			expect(now.available).toBeLessThanOrEqual(before.available + 1e-9);
			expect(state().flight!.legs.find((leg) => leg.id === cue.id)!.arrives).toBe(now.arrives.time);
			expect(beats.length).toBeGreaterThan(0);
		}
		expect(checkOf(cue.id).verdicts).toContain("too-fast");
		expect(checkOf(cue.id).slackBeats).toBeLessThan(0);
		expect(state().check!.flies).toBe(false);
		drag.commit();
		expect(state().undo).toBe(`Move arrival of cue ${cue.number}`);
		const compared = checkOf(cue.id);
		await studio.settled();
		// What the drag compared is what the proof then finds.
		const proven = checkOf(cue.id);
		expect(proven.verdicts).toEqual(compared.verdicts);
		expect(proven.slack).toBeCloseTo(compared.slack!, 9);
		expect(proven.slackBeats).toBeCloseTo(compared.slackBeats!, 9);
		for (const name of ["horizontal", "climb", "descent", "acceleration", "jerk"] as const) {
			expect(compared.peak[name]).toBeCloseTo(proven.peak[name], 6);
		}
	});

	it("takes a whole drag back in one step, brings it again, and takes it back", async () => {
		const cue = transitions()[0];
		expect(cue.length).toBe(0.5);
		expect(studio.commands.undo()).toBe(true);
		expect(transitions()[0].length).toBeGreaterThan(0.5);
		expect(state().redo).toBe(`Move arrival of cue ${cue.number}`);
		expect(checkOf(cue.id).verdicts).toContain("flies");
		studio.commands.redo();
		expect(transitions()[0].length).toBe(0.5);
		studio.commands.undo();
		await studio.settled();
		expect(state().check!.flies).toBe(true);
	});

	it("stops a drag at its neighbour and says why, and leaves no trace of one that is cancelled", () => {
		const [first, second] = transitions();
		const before = state().show;
		const undo = state().undo;
		const drag = studio.dragCue(first.id, "arrives")!;
		expect(drag.update(second.at + 3)).toBe(`Cue ${second.number} departs here.`);
		expect(transitions()[0].at + transitions()[0].length).toBeCloseTo(second.at, 9);
		drag.cancel();
		expect(state().show).toBe(before);
		expect(state().undo).toBe(undo);
	});

	it("says in a notice why an edit is refused, and the show stays as it was", () => {
		const before = state().show;
		expect(studio.commands.changeCue(transitions()[0].id, { formation: "nowhere" })).toBe(false);
		expect(state().show).toBe(before);
		const notice = state().notices.find(({ kind }) => kind === "error")!;
		expect(notice.text).toContain("nowhere");
		studio.commands.dismissNotice(notice.id);
		expect(state().notices.some(({ id }) => id === notice.id)).toBe(false);
	});

	it("plans again where a formation changes, and only the legs that touch it", async () => {
		const to = transitions()[0].formation;
		const touched = new Set(
			transitions().flatMap((cue, index, all) =>
				cue.formation === to || all[index - 1]?.formation === to ? [cue.id] : [],
			),
		);
		const { place } = state().show!.formations.byId[to];
		const [x, y, z] = place.position;
		expect(studio.commands.changeFormation(to, { place: { ...place, position: [x + 2, y, z] } })).toBe(true);
		for (const { id } of transitions()) expect(state().unchecked.has(id), id).toBe(touched.has(id));
		await studio.settled();
		expect(state().unchecked.size).toBe(0);
		expect(state().check!.flies).toBe(true);
		studio.commands.undo();
		await studio.settled();
	});

	it("hands off every file in one zip", async () => {
		expect(await studio.commands.exportHandOff({ rate: 10, lightRate: 10 })).toBe(true);
		const zip = fake.handed.at(-1)!;
		expect(zip.name).toMatch(/^harbour .+\.zip$/);
		const files = unzipSync(zip.bytes);
		expect(Object.keys(files)).toEqual(
			expect.arrayContaining(["cue-list.csv", "cue-list.json", "flight-paths.zip", "manifest.json", "report.html"]),
		);
		const paths = unzipSync(files["flight-paths.zip"]);
		const rows = strFromU8(paths["positions-0000.csv"]).split("\n");
		expect(rows[0]).toBe("drone,seconds,right_m,away_m,up_m");
		expect(state().notices.some(({ kind, text }) => kind === "done" && text.includes(zip.name))).toBe(true);
	});

	it("saves what reads back as the same show", async () => {
		expect(state().unsaved).toBe(true);
		expect(await studio.commands.save()).toBe(true);
		const file = fake.handed.at(-1)!;
		expect(file.name).toBe("harbour.starstave.json");
		expect(readShow(strFromU8(file.bytes))).toEqual(state().show);
		expect(state()).toMatchObject({ unsaved: false, fileName: "harbour.starstave.json" });
	});

	it("comes back from the autosave with sound, plans and verdicts, planning nothing again", async () => {
		await studio.flush();
		const asked: string[] = [];
		const counting: WorkerClient = {
			...workers,
			run: (kind, ask, options) => {
				asked.push(kind);
				return workers.run(kind, ask, options);
			},
			close: () => {},
		};
		const again = createFakeParts(counting, memory);
		const second = createStudio(again.parts);
		await second.start();
		await second.settled();
		await expect.poll(() => second.store.getState().audioReady, { timeout: 20_000 }).toBe(true);
		await second.settled();
		expect(second.store.getState().show).toEqual(state().show);
		expect(second.store.getState().check!.flies).toBe(true);
		expect(asked).not.toContain("plan");
		expect(again.told.seconds).toBeCloseTo(track.duration, 3);
		await second.close();
	});
});
