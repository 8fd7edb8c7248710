import { retimeCsv } from "../../core/handoff/index.ts";
import { createBeatMap, cuePosition, doneReviewing, find, putBack, putInTray } from "../../core/show/index.ts";
import type { NewEdits } from "../new-edit.ts";
import type { Workbench } from "../workbench.ts";
import type { NewEditCommands } from "./command-types.ts";

/** A new edit of the soundtrack: looked at, put right, taken over; and the tray. */
export function newEditCommands(bench: Workbench, edits: NewEdits): NewEditCommands {
	const { store, notices, parts } = bench;
	const attempt = async <T>(work: () => Promise<T>, otherwise: T): Promise<T> => {
		try {
			return await work();
		} catch (error) {
			notices.sayError(error);
			return otherwise;
		}
	};
	return {
		openNewEdit: (file) =>
			attempt(async () => {
				if (!bench.mayEdit()) return false;
				return edits.open({ name: file.name, bytes: new Uint8Array(await file.arrayBuffer()) });
			}, false),
		moveEditEdge: (index, edge, seconds) => {
			try {
				edits.moveEdge(index, edge, seconds);
				return true;
			} catch (error) {
				notices.sayError(error, "edit");
				return false;
			}
		},
		setEditAnchor: (pair) => attempt(() => edits.setAnchor(pair), false),
		takeBackCorrection: () => edits.takeBack(),
		chooseInEdit: (change) => edits.choose(change),
		hearEdit: (to) => attempt(() => edits.listen(to), undefined),
		acceptNewEdit: () => attempt(() => edits.accept(), false),
		dropNewEdit: () => attempt(() => edits.drop(), undefined),
		saveEditTable: () => {
			const { newEdit, show } = store.getState();
			if (newEdit === null || show === null) return;
			const name = `${newEdit.soundtrack.file.replace(/\.[^.]*$/, "")} cues moved.csv`;
			parts.files.download({ name, bytes: new TextEncoder().encode(retimeCsv(show, newEdit.result)) });
		},
		putCueInTray: (id) => {
			const number = find(store.getState().show?.cues ?? { byId: {}, order: [] }, id)?.number ?? id;
			return bench.edit(`Put cue ${number} in the tray`, (draft) => putInTray(draft, id)) !== null;
		},
		putBackFromTray: (index) => {
			const { show } = store.getState();
			if (show === null) return null;
			const beatMap = createBeatMap(show.grid);
			const at = Math.max(0, Math.round(beatMap.positionAt(parts.player.heardAt(performance.now()))));
			const id = bench.edit("Put a cue back from the tray", (draft) => putBack(draft, index, at));
			if (typeof id !== "string") return null;
			store.setState({ selection: { kind: "cues", ids: [id] } });
			return id;
		},
		doneReviewing: (id) => {
			const { show } = store.getState();
			const cue = show === null ? undefined : find(show.cues, id);
			const name = cue === undefined ? "Looked at a cue" : `Looked at cue ${cue.number}`;
			return bench.edit(name, (draft) => doneReviewing(draft, id)) !== null;
		},
		goToCue: (id) => {
			const { show } = store.getState();
			const cue = show === null ? undefined : find(show.cues, id);
			if (show === null || cue === undefined) return;
			const beatMap = createBeatMap(show.grid);
			store.setState({ selection: { kind: "cues", ids: [id] } });
			parts.player.seek(beatMap.secondsAt(cuePosition(cue, beatMap)));
		},
	};
}
