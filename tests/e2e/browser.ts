import { join, resolve } from "node:path";
import { type Browser, chromium, type Page } from "playwright-core";
import { createAppServer } from "../../scripts/serve.mjs";
import { findChromium } from "../../scripts/setup/chromium.mjs";

const root = resolve(import.meta.dirname, "../..");

/** The built app on a port of its own, and a Chromium with software rendering. */
export interface Stage {
	readonly address: string;
	/** A page with a fresh profile: nothing autosaved. What the page logs as an error is kept. */
	open(size?: { width: number; height: number }): Promise<OpenPage>;
	close(): Promise<void>;
}

export interface OpenPage {
	readonly page: Page;
	/** Errors on the console, uncaught errors, and requests that left the page's own address. */
	readonly complaints: string[];
	/** A second tab of the same profile. */
	beside(): Promise<OpenPage>;
}

export async function openStage(): Promise<Stage> {
	const executablePath = findChromium();
	if (!executablePath) throw new Error("The browser tests need Chromium: npm test sets it up or says how.");
	const server = createAppServer(join(root, "dist"));
	await new Promise<void>((done) => server.listen(0, "127.0.0.1", done));
	const port = (server.address() as { port: number }).port;
	const address = `http://127.0.0.1:${port}/`;
	const browser: Browser = await chromium.launch({
		executablePath,
		args: [
			"--no-sandbox",
			"--disable-quic",
			"--no-first-run",
			"--disable-background-networking",
			"--disable-component-update",
			"--disable-sync",
			"--use-angle=swiftshader",
			"--enable-unsafe-swiftshader",
			"--autoplay-policy=no-user-gesture-required",
		],
	});
	return {
		address,
		async open(size = { width: 1280, height: 720 }) {
			const context = await browser.newContext({ viewport: size, acceptDownloads: true });
			const openPage = async (): Promise<OpenPage> => {
				const page = await context.newPage();
				const complaints: string[] = [];
				page.on("console", (message) => message.type() === "error" && complaints.push(message.text()));
				page.on("pageerror", (error) => complaints.push(String(error)));
				page.on("request", (request) => {
					const url = request.url();
					if (!url.startsWith(address) && !/^(blob|data):/.test(url))
						complaints.push(`a request left the page: ${url}`);
				});
				await page.goto(address);
				await page.getByRole("main").waitFor();
				return { page, complaints, beside: openPage };
			};
			return openPage();
		},
		async close() {
			await browser.close();
			server.closeAllConnections();
			await new Promise((done) => server.close(done));
		},
	};
}
