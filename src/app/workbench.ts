import type { StoreApi } from "zustand/vanilla";
import { applyEdit, type DraftShow, type Show } from "../core/show/index.ts";
import { StarstaveError } from "../core/units/index.ts";
import type { NamedBytes } from "../platform/files.ts";
import type { Lease } from "../platform/lease.ts";
import type { Feasibility } from "./feasibility.ts";
import { createHistory, type History } from "./history.ts";
import type { Inquiry } from "./inquiry.ts";
import type { JobLedger } from "./job-ledger.ts";
import type { Keeper } from "./keeper.ts";
import type { KnownSound } from "./new-edit.ts";
import type { Notices } from "./notices.ts";
import type { StudioParts } from "./parts.ts";
import type { Selection, StudioState } from "./studio-state.ts";

/** What every command works with. */
export interface Workbench {
	readonly parts: StudioParts;
	readonly store: StoreApi<StudioState>;
	readonly notices: Notices;
	readonly ledger: JobLedger;
	readonly history: History;
	readonly keeper: Keeper;
	readonly feasibility: Feasibility;
	readonly inquiry: Inquiry;
	/** The soundtrack's file as the client gave it. */
	soundtrack: NamedBytes | null;
	/** Hash of the soundtrack that is heard and looked at; null: none. */
	heardHash: string | null;
	/** Soundtracks that undo may ask for again, by hash. */
	readonly sounds: Map<string, KnownSound>;
	/** This tab's leave to write; null until it has asked. */
	lease: Lease | null;
	/** Ends a drag that is under way, as if it were let go of; an edit from elsewhere must not be lost in it. */
	endDrag: () => void;
	/**
	 * One named edit, one step of undo.
	 * @returns what the edit answers, or true where it answers nothing; null where it was refused (a notice says why)
	 */
	edit<T>(name: string, recipe: (draft: DraftShow) => T): T | true | null;
	/** Walks back or forth. */
	walk(direction: "undo" | "redo"): boolean;
	/** True where edits are taken; else says why not. */
	mayEdit(): boolean;
	/** Everything that follows from a show that is new in the store. */
	showChanged(change: { readonly keep: boolean }): void;
}

type Built = Pick<Workbench, "parts" | "store" | "notices" | "ledger" | "keeper" | "feasibility" | "inquiry">;

export function createWorkbench(built: Built): Workbench {
	const { store, notices } = built;
	const history = createHistory();

	const bench: Workbench = {
		...built,
		history,
		soundtrack: null,
		heardHash: null,
		sounds: new Map(),
		lease: null,
		endDrag: () => {},
		mayEdit: () => {
			const { readOnly, show } = store.getState();
			if (readOnly !== null) notices.say("caution", readOnly, "read-only");
			else if (show === null) notices.say("caution", "There is no show yet: open a soundtrack or a show first.");
			return readOnly === null && show !== null;
		},
		edit: <T>(name: string, recipe: (draft: DraftShow) => T) => {
			bench.endDrag();
			if (!bench.mayEdit()) return null;
			let answer: T | undefined;
			try {
				const result = applyEdit(store.getState().show!, (draft) => {
					answer = recipe(draft);
				});
				if (result.patches.length > 0) {
					history.push(name, result);
					store.setState({ show: result.show, unsaved: true });
					bench.showChanged({ keep: true });
				}
			} catch (error) {
				notices.sayError(error, error instanceof StarstaveError ? "edit" : undefined);
				return null;
			}
			notices.dismiss("edit");
			return answer === undefined ? true : answer;
		},
		walk: (direction) => {
			bench.endDrag();
			if (!bench.mayEdit()) return false;
			const next = history[direction](store.getState().show!);
			if (next === null) return false;
			store.setState({ show: next, unsaved: true });
			bench.showChanged({ keep: true });
			return true;
		},
		showChanged: ({ keep }) => {
			const { show, selection } = store.getState();
			store.setState({
				undo: history.undoName,
				redo: history.redoName,
				selection: show === null ? { kind: "nothing" } : stillThere(selection, show),
			});
			built.feasibility.refresh();
			if (keep) built.keeper.touch();
		},
	};
	return bench;
}

/** The selection without what the show no longer holds. The same object where nothing is gone. */
function stillThere(selection: Selection, show: Show): Selection {
	const nothing: Selection = { kind: "nothing" };
	switch (selection.kind) {
		case "cues": {
			const ids = selection.ids.filter((id) => Object.hasOwn(show.cues.byId, id));
			if (ids.length === selection.ids.length) return selection;
			return ids.length > 0 ? { kind: "cues", ids } : nothing;
		}
		case "section":
			return show.sections.some((section) => section.id === selection.id) ? selection : nothing;
		case "formation":
			return Object.hasOwn(show.formations.byId, selection.id) ? selection : nothing;
		case "nothing":
			return selection;
	}
}
