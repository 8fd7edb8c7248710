import { recogniseFormat, type Samples } from "../core/decode/index.ts";
import type { Analysis } from "../core/music/index.ts";
import { applyEdit, createShow, type Show, setGrid, setSections, setSoundtrack } from "../core/show/index.ts";
import { StarstaveError } from "../core/units/index.ts";
import type { NamedBytes } from "../platform/files.ts";
import type { JobAnswer } from "../workers/index.ts";
import { gridOf, sectionsOf } from "./heard-grid.ts";
import type { Workbench } from "./workbench.ts";

/** Drones of a show that begins with a soundtrack, until the rough cut asks how many there are. */
export const DEFAULT_DRONES = 200;

type Heard = JobAnswer<"analyse">;

/** Decodes a soundtrack and listens to it, in a worker. */
export async function hear(bench: Workbench, { name, bytes }: NamedBytes, sha256: string | null): Promise<Heard> {
	const { ledger, keeper, parts } = bench;
	const kept = sha256 === null ? undefined : (await keeper.readShelf("analyses", [sha256])).get(sha256);
	const known = sha256 !== null && isAnalysis(kept) ? { sha256, analysis: kept } : null;
	const heard = await ledger.run("Listening to the soundtrack", async (signal, report) => {
		const samples = await decodeHere(bench, name, bytes);
		return parts.workers.run("analyse", { name, bytes, samples, known }, { signal, onProgress: report });
	});
	if (heard.analysis !== known?.analysis) keeper.writeShelf("analyses", heard.soundtrack.sha256, heard.analysis);
	return heard;
}

/** What only the browser decodes is decoded here; all else in the worker (null). */
async function decodeHere({ parts }: Workbench, name: string, bytes: Uint8Array): Promise<Samples | null> {
	if (recogniseFormat(bytes) !== "aac" || parts.decodeInBrowser === null) return null;
	try {
		const { sampleRate, channels } = await parts.decodeInBrowser(bytes);
		const notes = ["AAC is decoded by the browser; the command line can't read it, so hand on a WAV or FLAC."];
		return { sampleRate, channels, format: "aac", notes };
	} catch (cause) {
		throw new StarstaveError("soundtrack", `${name} is AAC that this browser can't decode: make a WAV of it.`, {
			cause,
		});
	}
}

/** Only its shape is looked at: the worker compares the version and listens anew where it is an older one. */
function isAnalysis(value: unknown): value is Analysis {
	if (value === null || typeof value !== "object") return false;
	const { version, beats, curves, peaks } = value as Partial<Analysis>;
	return (
		typeof version === "number" &&
		beats instanceof Float64Array &&
		Array.isArray(curves) &&
		peaks?.values instanceof Float32Array
	);
}

/** Puts what was heard beside the show that stands here: sound, analysis. */
export async function takeSound(bench: Workbench, file: NamedBytes, heard: Heard): Promise<void> {
	const { store, keeper, parts } = bench;
	bench.soundtrack = file;
	bench.heardHash = heard.soundtrack.sha256;
	await parts.player.load(heard.samples);
	setClicks(bench);
	store.setState({
		audioReady: true,
		soundNotes: [...heard.samples.notes, ...heard.analysis.notes],
		analysis: heard.analysis,
	});
	void keeper.keepSoundtrack(heard.soundtrack.sha256, file);
}

/** The click track follows the show's own grid. */
export function setClicks({ store, parts }: Workbench): void {
	const { show } = store.getState();
	parts.player.setClicks(
		show === null ? null : { beats: show.grid.beats, barStarts: new Set(show.grid.bars.map((bar) => bar.beat)) },
	);
}

/** Another show takes the place of the one that stands here, which is set aside and can be brought back. */
export async function replaceShow(
	bench: Workbench,
	show: Show,
	from: { readonly fileName: string | null; readonly unsaved: boolean },
	options: { readonly setAside?: boolean } = {},
): Promise<void> {
	const { store, history, feasibility, keeper, parts, ledger, notices } = bench;
	bench.endDrag();
	const before = store.getState().show;
	const isAside = options.setAside !== false && before !== null && (await keeper.setAside());
	ledger.cancelAll();
	history.clear();
	parts.files.forgetPlace();
	await parts.player.load(null);
	bench.soundtrack = null;
	bench.heardHash = null;
	bench.sounds.clear();
	notices.dismiss("edit");
	notices.dismiss("feasibility");
	feasibility.reset();
	store.setState({
		show,
		...from,
		previous: isAside ? before.title || "Untitled" : store.getState().previous,
		audioReady: false,
		soundNotes: [],
		analysis: null,
		newEdit: null,
		taps: null,
		afterEdit: null,
		selection: { kind: "nothing" },
	});
	setClicks(bench);
	bench.showChanged({ keep: true });
}

/** A soundtrack goes into the show that stands here where it has a place for it, else it begins a new one. */
export async function openSoundtrack(bench: Workbench, file: NamedBytes): Promise<void> {
	const { store, history, notices } = bench;
	const asked = store.getState().show;
	const heard = await hear(bench, file, asked?.soundtrack?.sha256 ?? null);
	const { show, readOnly } = store.getState();
	const belongs =
		show !== null &&
		readOnly === null &&
		(show.soundtrack === null || show.soundtrack.sha256 === heard.soundtrack.sha256);
	if (!belongs) {
		const title = file.name.replace(/\.[^.]*$/, "");
		await replaceShow(bench, withSoundtrack(createShow(DEFAULT_DRONES, title), heard).show, {
			fileName: null,
			unsaved: true,
		});
	} else if (show.soundtrack === null) {
		const edit = withSoundtrack(show, heard);
		history.push("Open the soundtrack", edit);
		store.setState({ show: edit.show, unsaved: true });
	}
	await takeSound(bench, file, heard);
	bench.showChanged({ keep: true });
	for (const note of store.getState().soundNotes) notices.say("caution", note);
}

function withSoundtrack(show: Show, { soundtrack, analysis }: Heard) {
	return applyEdit(show, (draft) => {
		setSoundtrack(draft, soundtrack);
		// A grid that was laid by hand before there was music stays.
		if (show.grid.beats.length === 0) {
			setGrid(draft, gridOf(analysis));
			setSections(draft, sectionsOf(analysis));
		}
	});
}

/**
 * A show from a file, with its soundtrack where that lies beside it or is kept in the browser.
 * @param isWanted false once something else has been asked for: then what stands here stays
 */
export async function openShow(
	bench: Workbench,
	file: NamedBytes,
	beside: NamedBytes | null,
	isWanted: () => boolean,
): Promise<void> {
	const { parts, ledger, notices, keeper } = bench;
	const read = await ledger.run(
		`Opening ${file.name}`,
		(signal) => parts.workers.run("read", { bytes: file.bytes }, { signal, urgent: true }),
		{ quiet: true },
	);
	if (!isWanted()) return;
	const wanted = read.show.soundtrack;
	await replaceShow(bench, read.show, { fileName: file.name, unsaved: false });
	if (wanted === null) return;
	const soundtrack = read.soundtrack ?? beside ?? (await keeper.readSoundtrack(wanted.sha256));
	if (soundtrack === null) {
		notices.say("caution", `The show's soundtrack is ${wanted.file}: open it too, to hear it and to see its music.`);
		return;
	}
	await hearOwn(bench, soundtrack);
}

/** Listens to the soundtrack that the show names, and says so where it is another one. */
export async function hearOwn(bench: Workbench, file: NamedBytes): Promise<void> {
	const { store, notices } = bench;
	const show = store.getState().show;
	const wanted = show?.soundtrack ?? null;
	if (wanted === null) return;
	const heard = await hear(bench, file, wanted.sha256);
	// Another show may have been opened while this one's music was being listened to.
	if (store.getState().show?.soundtrack?.sha256 !== wanted.sha256) return;
	if (heard.soundtrack.sha256 !== wanted.sha256) {
		notices.say("error", `${file.name} is not the soundtrack that this show was made for; open the one it names.`);
		return;
	}
	await takeSound(bench, file, heard);
	bench.showChanged({ keep: false });
}
