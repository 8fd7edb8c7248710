import type { Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { readShow } from "../../src/core/show/index.ts";
import { openStage, type Stage } from "./browser.ts";
import { makeTrack } from "./make-track.ts";
import { saveByDownload, savedShow } from "./saved-show.ts";

/** CSS pixels between the top of a line of the staves and its beats' ticks (staves/lanes.ts, page view). */
const TICKS = 20 + 36 + 2;

/** Where beat `beat` of the first line stands on the screen; the line holds `beats` of them. */
async function tickOf(page: Page, beat: number): Promise<{ x: number; y: number; perBeat: number }> {
	const body = page.locator(".stave-body").first();
	const box = (await body.boundingBox())!;
	const letters = await page.locator(".stave-bar").allTextContents();
	const beats = (Number(letters[1]) - Number(letters[0])) * 4;
	return { x: box.x + (box.width * beat) / beats, y: box.y + TICKS, perBeat: box.width / beats };
}

describe("a beat taken by the mouse", () => {
	let stage: Stage;
	beforeAll(async () => {
		stage = await openStage();
	});
	afterAll(() => stage.close());

	it("goes where it is taken, its neighbours follow, Escape and undo give the same show back byte for byte", async () => {
		const { page, complaints } = await stage.open();
		await saveByDownload(page);
		await page.getByLabel("Open a soundtrack or a show", { exact: true }).setInputFiles({
			name: "taken.wav",
			mimeType: "audio/wav",
			buffer: Buffer.from(makeTrack(100, 16, 3).wav),
		});
		await page.getByText(/About 100 beats a minute/).waitFor({ timeout: 60_000 });
		await expect.poll(() => page.locator(".job").count(), { timeout: 60_000 }).toBe(0);
		await page.locator("body").click({ position: { x: 2, y: 2 } });
		const before = await savedShow(page);
		const old = readShow(before).grid.beats;

		const line = page.locator(".stave-hint");
		const { x, y, perBeat } = await tickOf(page, 12);
		await page.mouse.move(x, y);
		expect(await page.locator(".staves").getAttribute("data-over")).toBe("beat");
		await page.mouse.down();
		// Three fifths of a beat later, free of onsets: 360 ms at 100 beats a minute.
		await page.keyboard.down("Alt");
		await page.mouse.move(x + perBeat * 0.3, y, { steps: 3 });
		await page.mouse.move(x + perBeat * 0.6, y, { steps: 3 });
		expect(await line.textContent()).toMatch(/^0:0\d\.\d{3}, \+3[56]\d ms$/);
		await page.keyboard.press("Escape");
		await page.mouse.up();
		await page.keyboard.up("Alt");
		expect(await line.isHidden()).toBe(true);
		expect(await savedShow(page)).toBe(before);

		await page.mouse.move(x, y);
		await page.mouse.down();
		await page.keyboard.down("Alt");
		await page.mouse.move(x + perBeat * 0.3, y, { steps: 3 });
		await page.mouse.move(x + perBeat * 0.6, y, { steps: 3 });
		await page.mouse.up();
		await page.keyboard.up("Alt");
		await page.getByRole("button", { name: "Undo: Move a beat (Ctrl+Z)" }).waitFor();
		const grid = readShow(await savedShow(page)).grid;
		const moved = grid.beats.map((beat, k) => (beat - old[k]) * 1000);
		expect(moved[12]).toBeGreaterThan(345);
		expect(moved[12]).toBeLessThan(375);
		expect(grid.anchors).toEqual([12]);
		// The eighth beat away stands still; those between follow the less the farther they are.
		for (let k = 5; k < 12; k++) expect(moved[k]).toBeGreaterThan(moved[k - 1] - 1e-6);
		expect(moved[8]).toBeCloseTo(moved[12] / 2, 0);
		expect(moved[4]).toBeCloseTo(0, 6);
		expect(moved[20]).toBeCloseTo(0, 6);

		// Back near its onset it goes there by itself.
		await page.mouse.move(x, y);
		await page.mouse.down();
		const back = (perBeat * (grid.beats[12] - old[12] - 0.015)) / (grid.beats[12] - grid.beats[11]);
		await page.mouse.move(x - back / 2, y, { steps: 3 });
		await page.mouse.move(x - back, y, { steps: 3 });
		await page.mouse.up();
		const snapped = readShow(await savedShow(page)).grid.beats;
		expect(Math.abs(snapped[12] - old[12])).toBeLessThan(0.011);

		// By keys: to that beat, a millisecond at a time.
		await page.keyboard.press("Home");
		for (let k = 0; k <= 12; k++) await page.keyboard.press("ArrowRight");
		await page.keyboard.press("Shift+Period");
		await page.keyboard.press("Shift+Period");
		await page.keyboard.press("Shift+Comma");
		const nudged = readShow(await savedShow(page)).grid.beats;
		const which = nudged.findIndex((beat, k) => Math.abs(beat - snapped[k]) > 1e-4);
		const far = nudged.map((beat, k) => beat - snapped[k]);
		expect(which).toBeGreaterThanOrEqual(0);
		expect(Math.max(...far)).toBeCloseTo(0.001, 6);

		for (let k = 0; k < 5; k++) await page.keyboard.press("Control+z");
		expect(await savedShow(page)).toBe(before);
		expect(complaints).toEqual([]);
	});
});
