import { createShow, type DraftShow, type Show } from "../../core/show/index.ts";
import { StarstaveError } from "../../core/units/index.ts";
import { analysisOnGrid } from "../heard-grid.ts";
import { hearOwn, openShow, openSoundtrack, replaceShow } from "../open-show.ts";
import type { Workbench } from "../workbench.ts";
import type { ShowCommands } from "./command-types.ts";
import { addFormationFrom } from "./formation-commands.ts";

/** Opening, saving, the rough cut and the hand-off. */
export function showCommands(bench: Workbench): ShowCommands {
	const { store, notices, ledger, keeper, feasibility, parts } = bench;

	/** Runs work that may take long; what goes wrong becomes a notice. */
	const attempt = async (work: () => Promise<boolean>): Promise<boolean> => {
		try {
			return await work();
		} catch (error) {
			notices.sayError(error);
			return false;
		}
	};
	const mayReplace = (): boolean => {
		const { readOnly } = store.getState();
		if (readOnly !== null) notices.say("caution", readOnly, "read-only");
		return readOnly === null;
	};

	// The demo comes in by itself at the start: who opens something of their own meanwhile must not lose it to the demo.
	let asked = 0;
	const begin = (): (() => boolean) => {
		const turn = ++asked;
		return () => turn === asked;
	};

	return {
		newShow: (drones) => {
			if (!mayReplace()) return false;
			begin();
			try {
				void replaceShow(bench, createShow(drones), { fileName: null, unsaved: false }).catch(notices.sayError);
				return true;
			} catch (error) {
				notices.sayError(error);
				return false;
			}
		},
		openFile: (file) =>
			attempt(async () => {
				if (/\.(svg|csv)$/i.test(file.name)) return (await addFormationFrom(bench, file)) !== null;
				if (!mayReplace()) return false;
				const isWanted = begin();
				const named = { name: file.name, bytes: new Uint8Array(await file.arrayBuffer()) };
				if (looksLikeShow(named.bytes)) await openShow(bench, named, null, isWanted);
				else await openSoundtrack(bench, named);
				return true;
			}),
		openDemo: () =>
			attempt(async () => {
				if (!mayReplace()) return false;
				if (parts.fetchDemo === null) {
					throw new StarstaveError("show", "There is no demo show here; open a soundtrack of your own instead.");
				}
				const isWanted = begin();
				const demo = await parts.fetchDemo();
				if (!isWanted()) return false;
				await openShow(bench, demo.show, demo.soundtrack, isWanted);
				return isWanted();
			}),
		bringBackPrevious: () =>
			attempt(async () => {
				if (!mayReplace()) return false;
				begin();
				const kept = await keeper.read("previous");
				if (kept === null) return false;
				const { show } = await parts.workers.run("read", { bytes: toBytes(kept.content) }, { urgent: true });
				const soundtrack = kept.soundtrack === null ? null : await keeper.readSoundtrack(kept.soundtrack);
				await replaceShow(bench, show, { fileName: kept.fileName, unsaved: kept.unsaved });
				if (soundtrack !== null) await hearOwn(bench, soundtrack);
				return true;
			}),
		makeRoughCut: ({ drones, seed }) =>
			attempt(async () => {
				if (!bench.mayEdit()) return false;
				const { show, analysis } = store.getState();
				if (show?.soundtrack == null || analysis === null) {
					throw new StarstaveError("show", "A rough cut is made from the music: open the soundtrack first.");
				}
				const { limits } = show.fleet;
				const ask = {
					analysis: analysisOnGrid(analysis, show),
					soundtrack: show.soundtrack,
					options: { drones, title: show.title, limits, venue: show.venue, seed },
				};
				const cut = await ledger.run("Making a rough cut", (signal, onProgress) =>
					parts.workers.run("draft", ask, { signal, onProgress }),
				);
				feasibility.takePlans(cut.plans);
				const isTaken = bench.edit("Rough cut", (draft) => takeOver(draft, cut.show)) !== null;
				if (isTaken) for (const note of cut.notes) notices.say("caution", note);
				return isTaken;
			}),
		save: ({ as = false, withSoundtrack } = {}) =>
			attempt(async () => {
				const { show, fileName } = store.getState();
				if (show === null) throw new StarstaveError("show", "There is no show to be saved yet.");
				const zipped = withSoundtrack ?? (fileName !== null && /\.starstave$/i.test(fileName));
				const soundtrack =
					zipped && bench.soundtrack !== null && show.soundtrack !== null
						? { name: show.soundtrack.file, bytes: bench.soundtrack.bytes }
						: null;
				if (zipped && soundtrack === null && withSoundtrack === true) {
					throw new StarstaveError("show", "The soundtrack isn't here to be saved with the show: open it first.");
				}
				const bytes = await parts.workers.run("write", { show, soundtrack }, { urgent: true });
				const ending = soundtrack === null ? ".starstave.json" : ".starstave";
				const base = (fileName ?? show.title).replace(/\.starstave(\.json)?$|\.json$/i, "");
				const saved = await parts.files.save(
					{ name: toFileName(base) + ending, bytes },
					{ as, description: "Starstave show", endings: [soundtrack === null ? ".json" : ".starstave"] },
				);
				if (saved === null) return false;
				// Edits made while the file was being written are not in it.
				store.setState((state) => ({ fileName: saved, unsaved: state.show !== show }));
				keeper.touch();
				notices.say("done", `Saved as ${saved}.`, "saved");
				return true;
			}),
		exportHandOff: (options) =>
			attempt(async () => {
				bench.endDrag();
				await feasibility.settled();
				const { show, slots, flight, check, care, analysis, unchecked } = store.getState();
				if (show === null || slots === null || flight === null || check === null || unchecked.size > 0) {
					throw new StarstaveError("flight", "The show has to be checked before it is handed off: see Verdicts.");
				}
				const curves = analysis?.curves ?? [];
				const timecode = { rate: options.timecode?.rate ?? "25", start: options.timecode?.start ?? "01:00:00:00" };
				const missing = "The soundtrack was not at hand, so flashes of what follows the music can't be judged.";
				const notes = analysis === null && show.soundtrack !== null ? [missing] : [];
				const ask = { show, slots, flight, check, care, curves, options: { ...options, timecode, notes } };
				const answer = await ledger.run("Writing the hand-off", (signal, onProgress) =>
					parts.workers.run("handoff", ask, { signal, onProgress }),
				);
				if (answer.zip === null) {
					const why = answer.notes[0] ?? "Some of the show can't be flown: see Verdicts, or hand off a draft.";
					throw new StarstaveError("flight", `Nothing was handed off. ${why}`);
				}
				const name = `${toFileName(show.title)} ${answer.revision}${answer.draft ? " draft" : ""}.zip`;
				parts.files.download({ name, bytes: answer.zip });
				for (const note of answer.notes) notices.say("caution", note);
				const drafted = answer.draft ? ", a draft without flight paths and light" : "";
				notices.say("done", `Handed off as ${name}${drafted}.`, "handed-off");
				return true;
			}),
		checkAgain: () => feasibility.again(),
	};
}

/** A zip, or text that begins like JSON. */
function looksLikeShow(bytes: Uint8Array): boolean {
	if (bytes[0] === 0x50 && bytes[1] === 0x4b) return true;
	let at = bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf ? 3 : 0;
	while (bytes[at] === 0x20 || bytes[at] === 0x09 || bytes[at] === 0x0a || bytes[at] === 0x0d) at++;
	return bytes[at] === 0x7b;
}

/**
 * What the rough cut made, in place of the cues and formations that were there. What is the user's own stays: title,
 * notes, what the drones are like, the grid that the cut was made on, and names of sections.
 */
function takeOver(draft: DraftShow, cut: Show): void {
	const { opening, formations, cues, venue } = cut;
	Object.assign(draft, { opening, formations, cues, venue, takeoff: cut.takeoff });
	const isSameFleet = draft.fleet.count === cut.fleet.count;
	draft.fleet = { ...draft.fleet, count: cut.fleet.count, limits: cut.fleet.limits };
	if (!isSameFleet) Object.assign(draft, { groups: cut.groups });
	if (draft.grid.beats.length === 0) Object.assign(draft, { grid: cut.grid });
	if (draft.sections.every((section) => section.name === "")) Object.assign(draft, { sections: cut.sections });
}

export function toBytes(content: unknown): Uint8Array {
	return new TextEncoder().encode(JSON.stringify(content));
}

/** Without what some file system refuses. */
function toFileName(title: string): string {
	// biome-ignore lint/suspicious/noControlCharactersInRegex: control characters are what is taken out
	const safe = title.replace(/[\u0000-\u001f<>:"/\\|?*]+/g, " ").trim();
	return safe === "" ? "Untitled" : safe;
}
