import { applyRemedy } from "../../core/flight/index.ts";
import {
	addCue,
	changeCue,
	copyCues,
	find,
	moveCue,
	moveCues,
	removeCues,
	renumberCue,
} from "../../core/show/index.ts";
import type { Workbench } from "../workbench.ts";
import type { CueCommands } from "./command-types.ts";

/** Edits of cues. */
export function cueCommands(bench: Workbench): CueCommands {
	const { store } = bench;
	/** "cue 12", or "3 cues". */
	const called = (ids: readonly string[]): string => {
		const { show } = store.getState();
		const cue = show === null ? undefined : find(show.cues, ids[0]);
		return ids.length === 1 && cue !== undefined ? `cue ${cue.number}` : `${ids.length} cues`;
	};
	const select = (ids: readonly string[]): void => store.setState({ selection: { kind: "cues", ids } });
	return {
		addCue: (cue) => {
			const id = bench.edit(`Add ${cue.kind}`, (draft) => addCue(draft, cue));
			if (typeof id !== "string") return null;
			select([id]);
			return id;
		},
		changeCue: (id, change) => bench.edit(`Change ${called([id])}`, (draft) => changeCue(draft, id, change)) !== null,
		changeCues: (ids, change) =>
			bench.edit(`Change ${called(ids)}`, (draft) => {
				for (const id of ids) changeCue(draft, id, change);
			}) !== null,
		moveCue: (id, at) => bench.edit(`Move ${called([id])}`, (draft) => moveCue(draft, id, at)) !== null,
		moveCues: (ids, beats) => bench.edit(`Move ${called(ids)}`, (draft) => moveCues(draft, ids, beats)) !== null,
		renumberCue: (id, number) =>
			bench.edit(`Renumber ${called([id])}`, (draft) => renumberCue(draft, id, number)) !== null,
		copyCues: (ids, at) => {
			const copies = bench.edit(`Copy ${called(ids)}`, (draft) => copyCues(draft, ids, at));
			if (!Array.isArray(copies)) return null;
			select(copies);
			return copies;
		},
		removeCues: (ids) => bench.edit(`Remove ${called(ids)}`, (draft) => removeCues(draft, ids)) !== null,
		applyRemedy: (remedy) => {
			bench.feasibility.takePlans(bench.inquiry.plansOf(remedy));
			return bench.edit(remedy.change.replace(/\.$/, ""), (draft) => applyRemedy(draft, remedy)) !== null;
		},
	};
}
