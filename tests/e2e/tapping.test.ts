import type { Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { openStage, type Stage } from "./browser.ts";
import { makeTrack } from "./make-track.ts";
import { saveByDownload, savedShow } from "./saved-show.ts";

/** The beats put right by hand, by keyboard alone. */
describe("putting the beats right", () => {
	let stage: Stage;
	beforeAll(async () => {
		stage = await openStage();
	});
	afterAll(() => stage.close());

	it("halves the beats, taps them along at the right level, moves one, sets a metre, and takes it all back", async () => {
		const { page, complaints } = await stage.open();
		await saveByDownload(page);
		const track = makeTrack(104, 24, 5);
		await page.getByLabel("Open a soundtrack or a show", { exact: true }).setInputFiles({
			name: "tapped.wav",
			mimeType: "audio/wav",
			buffer: Buffer.from(track.wav),
		});
		await page.getByText(/About 104 beats a minute/).waitFor({ timeout: 60_000 });
		await expect.poll(() => page.locator(".job").count(), { timeout: 60_000 }).toBe(0);
		await page.locator("body").click({ position: { x: 2, y: 2 } });
		const before = await savedShow(page);
		await find(page, "Half as many beats");
		const place = page.locator(".place strong");

		// A tap on every beat while it plays; the browser's own clock is unsteady by tens of milliseconds, as a hand is.
		await page.locator("body").click({ position: { x: 2, y: 2 } });
		await page.keyboard.press("Home");
		const interval = 60_000 / 104;
		const start = Date.now();
		for (let k = 0; k < 20; k++) {
			const wait = start + k * interval - Date.now();
			if (wait > 0) await page.waitForTimeout(wait);
			await page.keyboard.press("j");
		}
		await page.keyboard.press("Space");
		const panel = page.getByLabel("Tapping along");
		expect(await panel.getByText(/^20 taps\. 10[2-6]\.\d beats a minute/).count()).toBe(1);
		await panel.getByRole("button", { name: "Take the beats over" }).click();
		await panel.waitFor({ state: "detached" });
		await page.getByRole("button", { name: "Undo: Beats tapped along (Ctrl+Z)" }).waitFor();

		// A beat 10 ms later; a bar of three from here on.
		await page.locator("body").click({ position: { x: 2, y: 2 } });
		await page.keyboard.press("Home");
		for (let k = 0; k < 3; k++) await page.keyboard.press("ArrowRight");
		await page.keyboard.press(".");
		await page.getByRole("button", { name: "Undo: Move a beat (Ctrl+Z)" }).waitFor();
		await find(page, "Metre from this beat on");
		await page.getByLabel("beats in a bar").fill("3");
		await page.getByRole("button", { name: "Set the metre" }).click();
		await expect.poll(() => place.textContent()).toMatch(/beat 1$/);

		for (let k = 0; k < 4; k++) await page.keyboard.press("Control+z");
		await page
			.getByRole("button", { name: "Nothing to undo" })
			.or(page.getByRole("button", { name: /^Undo: Open/ }))
			.waitFor();
		expect(await savedShow(page)).toBe(before);
		expect(complaints).toEqual([]);
	});
});

/** An action by its name, through the command finder. */
async function find(page: Page, name: string): Promise<void> {
	await page.locator("body").click({ position: { x: 2, y: 2 } });
	await page.keyboard.press("Control+k");
	await page.keyboard.type(name);
	await page.keyboard.press("Enter");
}
