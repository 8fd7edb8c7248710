import { SHOW_VERSION, versionOf } from "../core/show/index.ts";
import { StarstaveError } from "../core/units/index.ts";
import { toBytes } from "./commands/show-commands.ts";
import { hearOwn, replaceShow } from "./open-show.ts";
import type { Workbench } from "./workbench.ts";

const ELSEWHERE =
	"This show is open in another tab, so it can only be looked at here. Close the other tab, and it can be worked on here.";

/**
 * Brings back what was kept. Only one tab at a time writes: a second one opens the show to be looked at, and takes over
 * when the first is closed. What a newer program kept is neither read nor written over.
 * @returns whether a show was there
 */
export async function restore(bench: Workbench): Promise<boolean> {
	const { store, notices, keeper, parts } = bench;
	const lease = await parts.takeLease();
	bench.lease = lease;
	if (!lease.held) {
		store.setState({ readOnly: ELSEWHERE });
		void lease.later.then(async () => {
			store.setState({ readOnly: null });
			notices.dismiss("read-only");
			// The other tab went on working after this one had read the show.
			await readCurrent(bench);
			notices.say("done", "The other tab is closed: the show can be worked on here now.");
		});
	}
	try {
		keeper.attach(await parts.openAutosave());
	} catch (error) {
		notices.sayError(error, "storage");
		return false;
	}
	return readCurrent(bench);
}

async function readCurrent(bench: Workbench): Promise<boolean> {
	const { store, notices, keeper, parts } = bench;
	const kept = await keeper.read("current");
	const previous = await keeper.read("previous");
	store.setState({ previous: previous === null ? null : previous.title || "Untitled" });
	if (kept === null) return false;
	const version = versionOf(kept.content);
	if (version !== null && version > SHOW_VERSION) {
		keeper.attach(null);
		notices.say(
			"error",
			"A newer version of this program has kept a show in this browser; it is not read and not written over, and nothing is kept until the page is reloaded with the newer program.",
			"storage",
		);
		return false;
	}
	try {
		const { show } = await parts.workers.run("read", { bytes: toBytes(kept.content) }, { urgent: true });
		await replaceShow(bench, show, { fileName: kept.fileName, unsaved: kept.unsaved }, { setAside: false });
	} catch (error) {
		// What can't be read is left where it is, so that nothing is lost: this tab keeps nothing over it.
		keeper.attach(null);
		const why = error instanceof StarstaveError ? ` ${error.message}` : "";
		notices.say("error", `The show kept in this browser can't be read; it is left as it is.${why}`, "storage");
		return false;
	}
	const { soundtrack } = store.getState().show ?? {};
	if (soundtrack == null) return true;
	const file = await keeper.readSoundtrack(soundtrack.sha256);
	if (file === null) {
		notices.say(
			"caution",
			`The show's soundtrack is ${soundtrack.file}: open it too, to hear it and to see its music.`,
		);
	} else {
		// The show is there to be looked at while its music is decoded.
		void hearOwn(bench, file).catch((error) => notices.sayError(error));
	}
	return true;
}
