import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { createStudio, type Studio } from "../../src/app/index.ts";
import { createBeatMap, cueTimes, type Show, writeShow } from "../../src/core/show/index.ts";
import type { WorkerClient } from "../../src/workers/index.ts";
import { createNodeWorkers } from "../../src/workers/node-workers.ts";
import { writeWav } from "../cli/make-track.ts";
import { cutTrack } from "../e2e/cut-track.ts";
import { makeTrack } from "../e2e/make-track.ts";
import { type BundledWorker, bundleWorker } from "../workers/bundle-worker.ts";
import { createFakeParts } from "./fake-parts.ts";

const RATE = 44100;
const track = makeTrack(120, 24);
const fileOf = (bytes: Uint8Array, name: string) => new File([bytes as Uint8Array<ArrayBuffer>], name);

describe("the client sends a new edit", () => {
	let bundled: BundledWorker;
	let workers: WorkerClient;
	let studio: Studio;
	let fake: ReturnType<typeof createFakeParts>;
	let before: Show;
	beforeAll(async () => {
		bundled = await bundleWorker();
		workers = createNodeWorkers(bundled.entry, 2);
		fake = createFakeParts(workers);
		studio = createStudio(fake.parts);
		await studio.start();
		await studio.commands.openFile(fileOf(track.wav, "harbour.wav"));
		await studio.commands.makeRoughCut({ drones: 20 });
		// A cue on a beat that the new edit no longer has.
		studio.commands.addCue({
			kind: "intensity",
			at: createBeatMap(state().show!.grid).positionAt(21.02),
			level: 1,
			name: "gone",
		});
		await studio.settled();
		before = state().show!;
	});
	afterAll(async () => {
		await studio.close();
		bundled.remove();
	});
	const state = () => studio.store.getState();
	const timeOf = (show: Show, id: string) => cueTimes(show.cues.byId[id], createBeatMap(show.grid)).start;

	it("says so where the new soundtrack is the old one, or is another piece, and moves nothing", async () => {
		expect(await studio.commands.openNewEdit(fileOf(track.wav, "same.wav"))).toBe(false);
		expect(state().notices.at(-1)?.text).toContain("the very soundtrack");
		const noise = Float32Array.from({ length: 30 * RATE }, (_, i) => 0.3 * Math.sin(i * i * 1e-4));
		expect(await studio.commands.openNewEdit(fileOf(writeWav([noise], RATE), "other.wav"))).toBe(false);
		expect(state().notices.at(-1)?.text).toContain("another piece of music");
		expect(state().newEdit).toBeNull();
		expect(state().show).toBe(before);
		for (const notice of state().notices) studio.commands.dismissNotice(notice.id);
	});

	it("finds the cut, and leaves the show as it is until it is taken over", async () => {
		expect(await studio.commands.openNewEdit(fileOf(cutTrack(track.wav, 20, 24), "harbour short.wav"))).toBe(true);
		const { newEdit, show } = state();
		expect(show).toBe(before);
		const cut = newEdit!.map.stretches.find((one) => one.kind === "cut")!;
		expect(cut.old[1] - cut.old[0]).toBeCloseTo(4, 2);
		const moves = newEdit!.result.cues;
		expect(moves.filter((one) => one.status === "orphan").length).toBeGreaterThan(0);
		for (const move of moves.filter((one) => one.status === "moved" && one.oldTime > 26)) {
			expect(move.newTime! - move.oldTime).toBeCloseTo(-4, 3);
		}
		expect(newEdit!.receipt.transitions.length).toBeGreaterThan(0);
	});

	it("takes corrections of the map, one after the other, and takes them back", async () => {
		const found = state().newEdit!.map;
		const index = found.stretches.findIndex((one) => one.kind === "kept");
		expect(studio.commands.moveEditEdge(index, "end", found.stretches[index].new[1] - 0.5)).toBe(true);
		expect(state().newEdit!.corrections).toBe(1);
		expect(state().newEdit!.map).not.toEqual(found);
		expect(await studio.commands.setEditAnchor({ old: 30, new: 26 })).toBe(true);
		expect(state().newEdit!.anchors).toEqual([{ old: 30, new: 26 }]);
		expect(await studio.commands.setEditAnchor({ old: 30, new: 9999 })).toBe(false);
		expect(state().notices.at(-1)?.text).toContain("lies within both soundtracks");
		for (const notice of state().notices) studio.commands.dismissNotice(notice.id);
		expect(studio.commands.takeBackCorrection()).toBe(true);
		expect(studio.commands.takeBackCorrection()).toBe(true);
		expect(studio.commands.takeBackCorrection()).toBe(false);
		expect(state().newEdit!.map).toEqual(found);
	});

	it("plays either soundtrack at the same place in the music", async () => {
		studio.commands.seek(30);
		await studio.commands.hearEdit("new");
		expect(fake.told.seconds).toBeCloseTo(track.duration - 4, 2);
		expect(studio.player.heardAt(0)).toBeCloseTo(26, 2);
		await studio.commands.hearEdit("old");
		expect(fake.told.seconds).toBeCloseTo(track.duration, 2);
		expect(studio.player.heardAt(0)).toBeCloseTo(30, 2);
	});

	it("writes a table of every cue", () => {
		studio.commands.saveEditTable();
		const text = new TextDecoder().decode(fake.handed.at(-1)!.bytes);
		expect(text.split("\n")[0]).toMatch(/^cue,kind,name,old_seconds/);
		expect(text.trimEnd().split("\n").length).toBe(before.cues.order.length + 1);
		expect(text).toContain("in the tray");
	});

	it("is taken over in one step: cues on their music, orphans in the tray, plans kept", async () => {
		const { result } = state().newEdit!;
		const orphans = result.cues.filter((one) => one.status === "orphan");
		const plans = new Set(state().flight!.legs.map((leg) => leg.plan.shortest));
		expect(await studio.commands.acceptNewEdit()).toBe(true);
		await studio.settled();
		const { show, afterEdit, undo } = state();
		expect(undo).toBe("Take over the new edit");
		expect(show!.soundtrack!.file).toBe("harbour short.wav");
		expect(show!.retimedFrom!.file).toBe("harbour.wav");
		expect(show!.orphans!.map((one) => one.cue.id)).toEqual(orphans.map((one) => one.id));
		for (const move of result.cues) {
			if (move.newTime !== null) expect(timeOf(show!, move.id)).toBeCloseTo(move.newTime, 6);
		}
		expect(fake.told.seconds).toBeCloseTo(track.duration - 4, 2);
		// The same geometry keeps its plan: nothing is planned anew for what was only moved.
		const same = afterEdit!.receipt.transitions.filter((one) => one.status === "same");
		for (const one of same) {
			const leg = state().flight!.legs.find(({ id }) => id === one.cue)!;
			expect(plans.has(leg.plan.shortest)).toBe(true);
		}
		expect(readBack(show!)).toEqual(show!.orphans!.length);
	});

	it("goes back whole with one undo, sound and all, and forth again", async () => {
		const after = state().show!;
		expect(studio.commands.undo()).toBe(true);
		expect(writeShow(state().show!)).toBe(writeShow(before));
		await expect.poll(() => fake.told.seconds).toBeCloseTo(track.duration, 2);
		expect(state().analysis!.duration).toBeCloseTo(track.duration, 2);
		expect(studio.commands.redo()).toBe(true);
		expect(writeShow(state().show!)).toBe(writeShow(after));
		await expect.poll(() => fake.told.seconds).toBeCloseTo(track.duration - 4, 2);
	});

	it("puts a cue back from the tray at the beat under the ear, and a cue into it", () => {
		const waiting = state().show!.orphans!;
		studio.commands.seek(10.02);
		const id = studio.commands.putBackFromTray(0)!;
		expect(id).toBe(waiting[0].cue.id);
		expect(state().show!.orphans?.length ?? 0).toBe(waiting.length - 1);
		const at = timeOf(state().show!, id);
		expect(Math.abs(at - 10.02)).toBeLessThan(0.3);
		expect(studio.commands.putCueInTray(id)).toBe(true);
		expect(state().show!.orphans!.at(-1)!.cue.id).toBe(id);
		expect(state().show!.cues.byId[id]).toBeUndefined();
		expect(studio.commands.undo() && studio.commands.undo()).toBe(true);
		expect(state().show!.orphans).toEqual(waiting);
	});
});

/** How many cues wait in the tray of the show's own file. */
function readBack(show: Show): number {
	return (JSON.parse(writeShow(show)) as { orphans?: unknown[] }).orphans?.length ?? 0;
}
