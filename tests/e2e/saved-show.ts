import { readFileSync } from "node:fs";
import type { Page } from "playwright-core";

/** Without a file dialog, saving is a download. The page is loaded anew. */
export async function saveByDownload(page: Page): Promise<void> {
	await page.context().addInitScript("delete window.showSaveFilePicker");
	await page.reload();
}

/** Saves by Ctrl+S. @returns the file's text, byte for byte */
export async function savedShow(page: Page): Promise<string> {
	const [download] = await Promise.all([
		page.waitForEvent("download", { timeout: 30_000 }),
		page.keyboard.press("Control+s"),
	]);
	return readFileSync(await download.path(), "utf8");
}
