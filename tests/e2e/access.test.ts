import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { axePath, findBarriers } from "./barriers.ts";
import { openStage, type Stage } from "./browser.ts";
import { makeTrack } from "./make-track.ts";

describe("access", () => {
	let stage: Stage;
	beforeAll(async () => {
		stage = await openStage();
	});
	afterAll(() => stage.close());

	it("every screen passes axe-core, and all is reached by keyboard alone", async () => {
		const { page } = await stage.open();
		// Past the content security policy as a debugger goes past it: not part of the page.
		await page.context().addInitScript({ path: axePath });
		await page.reload();
		await page.getByRole("main").waitFor();
		await page.getByLabel("Open a soundtrack or a show", { exact: true }).setInputFiles({
			name: "keys.wav",
			mimeType: "audio/wav",
			buffer: Buffer.from(makeTrack(118, 24, 5).wav),
		});
		await page.getByText(/About 118 beats a minute/).waitFor({ timeout: 60_000 });
		// Command finder by key, rough cut by name.
		await page.keyboard.press("Control+k");
		await page.keyboard.type("rough");
		expect(await findBarriers(page)).toEqual([]);
		await page.keyboard.press("Enter");
		await page.getByRole("dialog", { name: "Rough cut" }).waitFor();
		await page.getByRole("dialog").getByLabel("drones").fill("25");
		expect(await findBarriers(page)).toEqual([]);
		await page.keyboard.press("Tab");
		await page.keyboard.press("Tab");
		await page.keyboard.press("Enter");
		await page.getByText(/^(\d+) of \1 fly$/).waitFor({ timeout: 60_000 });
		await page.locator("body").click({ position: { x: 2, y: 2 } });
		for (const key of [
			"Shift+Digit1",
			"Shift+Digit2",
			"Shift+Digit3",
			"Shift+Digit4",
			"Shift+Digit5",
			"Shift+Digit6",
			"Shift+Digit7",
		]) {
			await page.keyboard.press(key);
			expect(await findBarriers(page), key).toEqual([]);
		}
		// Cue by cue, each kind in the margin.
		for (let i = 0; i < 5; i++) {
			await page.keyboard.press("ArrowDown");
			await page.keyboard.press("Shift+Digit1");
			expect(await findBarriers(page), `cue ${i + 1}`).toEqual([]);
		}
		// Move a cue by a beat and take it back.
		const place = page.getByLabel(/^(at|departs)$/);
		const before = await place.inputValue();
		await page.keyboard.press("Alt+ArrowRight");
		await expect.poll(() => place.inputValue()).not.toBe(before);
		await page.keyboard.press("Control+z");
		await expect.poll(() => place.inputValue()).toBe(before);
		await page.keyboard.press("v");
		await page.getByRole("button", { name: "Page view" }).waitFor();
		expect(await findBarriers(page), "strip").toEqual([]);
		await page.keyboard.press("?");
		await page.getByRole("dialog", { name: "Keys" }).waitFor();
		expect(await findBarriers(page), "keys").toEqual([]);
	});
});
