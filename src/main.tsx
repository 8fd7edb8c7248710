import "pixi.js/unsafe-eval";
import { createStudio } from "./app/index.ts";
import { StarstaveError } from "./core/units/index.ts";
import { openAutosave } from "./platform/autosave.ts";
import { decodeInBrowser } from "./platform/decode-in-browser.ts";
import { createBrowserFiles, type NamedBytes } from "./platform/files.ts";
import { takeLease } from "./platform/lease.ts";
import { createSoundPlayer } from "./platform/sound-player.ts";
import { mountUi } from "./ui/index.ts";
import { createBrowserWorkers } from "./workers/browser-workers.ts";

/** Addresses of what lies in demo-tracks/, by name, as the build has placed it. */
const demoFiles = new Map(
	Object.entries(
		import.meta.glob<string>(["../demo-tracks/*.starstave.json", "../demo-tracks/*.ogg", "../demo-tracks/*.mp3"], {
			query: "?url",
			import: "default",
			eager: true,
		}),
	).map(([path, address]) => [path.slice(path.lastIndexOf("/") + 1), address]),
);
const demoShow = [...demoFiles.keys()].find((name) => name.endsWith(".starstave.json"));

async function fetchDemoFile(name: string): Promise<NamedBytes> {
	const address = demoFiles.get(name);
	const response = address === undefined ? null : await fetch(address);
	if (!response?.ok) throw new StarstaveError("show", `The demo's file ${name} is missing; build the program again.`);
	return { name, bytes: new Uint8Array(await response.arrayBuffer()) };
}

async function fetchDemo(name: string): Promise<{ show: NamedBytes; soundtrack: NamedBytes | null }> {
	const show = await fetchDemoFile(name);
	const { soundtrack } = JSON.parse(new TextDecoder().decode(show.bytes)) as { soundtrack: { file: string } | null };
	return { show, soundtrack: soundtrack === null ? null : await fetchDemoFile(soundtrack.file) };
}

const studio = createStudio({
	workers: createBrowserWorkers(),
	player: createSoundPlayer(),
	files: createBrowserFiles(),
	openAutosave,
	takeLease,
	fetchDemo: demoShow === undefined ? null : () => fetchDemo(demoShow),
	decodeInBrowser,
});
const root = document.getElementById("root");
if (root === null) throw new Error("index.html has no element with the id root");
mountUi(root, studio);
void studio.start();

// What waits to be kept is kept before the page goes; a browser may end a page out of sight without a further word.
window.addEventListener("pagehide", () => void studio.flush());
document.addEventListener("visibilitychange", () => {
	if (document.visibilityState === "hidden") void studio.flush();
});
