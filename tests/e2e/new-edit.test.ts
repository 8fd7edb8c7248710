import type { Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { axePath, findBarriers } from "./barriers.ts";
import { openStage, type Stage } from "./browser.ts";
import { cutTrack } from "./cut-track.ts";
import { makeTrack } from "./make-track.ts";

const BEAT = 60 / 116;
const LEAD = 0.4;

/** The client sends a new cut: a stretch of four bars is gone. */
describe("retiming cues after a music edit", () => {
	let stage: Stage;
	beforeAll(async () => {
		stage = await openStage();
	});
	afterAll(() => stage.close());

	it("finds the cut, takes a correction by keyboard, moves every cue in one step, and goes back whole", async () => {
		const { page, complaints } = await stage.open({ width: 1440, height: 900 });
		await page.context().addInitScript({ path: axePath });
		await page.reload();
		await page.getByRole("main").waitFor();
		const track = makeTrack(116, 32, 3);
		await setFile(page, "Open a soundtrack or a show", "harbour.wav", track.wav);
		await page.getByText(/About 116 beats a minute/).waitFor({ timeout: 60_000 });
		await page.getByRole("button", { name: "Make a rough cut …" }).first().click();
		await page.getByRole("dialog").getByLabel("drones").fill("24");
		await page.getByRole("button", { name: "Make the rough cut" }).click();
		await page.getByText(/^(\d+) of \1 fly$/).waitFor({ timeout: 60_000 });
		await expect.poll(() => page.locator(".job").count(), { timeout: 60_000 }).toBe(0);

		// Four bars from bar 13 on are gone.
		const from = LEAD + 48 * BEAT;
		await setFile(
			page,
			"Open a new edit of the music",
			"harbour short.wav",
			cutTrack(track.wav, from, from + 16 * BEAT),
		);
		const take = page.getByRole("button", { name: "Take over the new edit" });
		await take.waitFor({ timeout: 60_000 });
		expect(await page.getByText(/8\.3 s were cut/).count()).toBe(1);
		expect(
			await page
				.locator(".cue-table")
				.getByText(/8\.28 s earlier/)
				.count(),
		).toBeGreaterThan(0);
		expect(await findBarriers(page)).toEqual([]);

		// An edge by the arrow keys, and taken back.
		const edge = page.getByRole("slider", { name: /^End of the music kept from 0:00/ });
		const before = await edge.getAttribute("aria-valuenow");
		await edge.focus();
		await page.keyboard.press("ArrowLeft");
		await expect.poll(() => edge.getAttribute("aria-valuenow")).not.toBe(before);
		await page.getByText("Correct what went where").click();
		await page.getByRole("button", { name: "Take back the last correction" }).click();
		await expect.poll(() => edge.getAttribute("aria-valuenow")).toBe(before);

		// X flips between old and new at the same place in the music.
		await page.locator(".cue-table").getByRole("radio", { name: /^all/ }).check();
		await page
			.getByRole("button", { name: /^Cue \d+(\.\d+)?: go there$/ })
			.last()
			.click();
		const clock = page.locator(".place .quiet");
		await expect.poll(() => clock.textContent()).not.toBe("0:00.000");
		const there = await clock.textContent();
		await page.keyboard.press("x");
		await page.getByRole("radio", { name: "the new one" }).and(page.locator(":checked")).waitFor();
		await expect.poll(() => clock.textContent()).not.toBe(there);
		await page.keyboard.press("x");
		await expect.poll(() => clock.textContent()).toBe(there);

		await take.click();
		await page.locator(".staves").waitFor();
		await expect.poll(() => page.locator(".job").count(), { timeout: 60_000 }).toBe(0);
		await page.getByRole("button", { name: "Tray", exact: true }).click();
		await page.getByRole("heading", { name: "After the new edit" }).waitFor();
		expect(await page.getByText(/transitions keep the paths that they had on harbour\.wav/).count()).toBe(1);
		expect(await findBarriers(page)).toEqual([]);
		const undo = page.getByRole("button", { name: "Undo: Take over the new edit (Ctrl+Z)" });
		await undo.click();
		await page.getByRole("button", { name: /^Redo: Take over the new edit/ }).waitFor();
		await expect.poll(() => page.getByRole("heading", { name: "Tray", exact: true }).count()).toBe(1);
		// axe-core itself puts inline styles in, which the content policy refuses; nothing else may be refused.
		expect(complaints.filter((one) => !/inline style/.test(one))).toEqual([]);
	});
});

async function setFile(page: Page, label: string, name: string, wav: Uint8Array): Promise<void> {
	await page
		.getByLabel(label, { exact: true })
		.setInputFiles({ name, mimeType: "audio/wav", buffer: Buffer.from(wav) });
}
