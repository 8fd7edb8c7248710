import {
	addFormation,
	changeFormation,
	copyFormation,
	find,
	type NewFormation,
	removeFormation,
	setOpening,
} from "../../core/show/index.ts";
import type { Workbench } from "../workbench.ts";
import type { FormationCommands } from "./command-types.ts";

/** Edits of formations. */
export function formationCommands(bench: Workbench): FormationCommands {
	const { store } = bench;
	const called = (id: string): string => {
		const { show } = store.getState();
		const name = show === null ? "" : find(show.formations, id)?.name;
		return name ? `formation ${name}` : "formation";
	};
	return {
		addFormation: (formation) => add(bench, "Add formation", formation),
		changeFormation: (id, change) =>
			bench.edit(`Change ${called(id)}`, (draft) => changeFormation(draft, id, change)) !== null,
		copyFormation: (id) => {
			const copy = bench.edit(`Copy ${called(id)}`, (draft) => copyFormation(draft, id));
			return typeof copy === "string" ? copy : null;
		},
		removeFormation: (id) => bench.edit(`Remove ${called(id)}`, (draft) => removeFormation(draft, id)) !== null,
		setOpening: (id) => bench.edit("Choose the opening", (draft) => setOpening(draft, id)) !== null,
		addFormationFrom: (file) => addFormationFrom(bench, file),
	};
}

/** A file with a drawing or with points becomes a formation. @returns its id, null where it was refused */
export async function addFormationFrom(bench: Workbench, file: File): Promise<string | null> {
	const { store, notices, ledger, parts } = bench;
	if (!bench.mayEdit()) return null;
	try {
		const text = await file.text();
		const { fleet, venue } = store.getState().show!;
		const title = file.name.replace(/\.[^.]*$/, "");
		const { note, ...made } = await ledger.run(
			`Reading ${file.name}`,
			(signal) => parts.workers.run("readShape", { name: file.name, title, text, fleet, venue }, { signal }),
			{ quiet: true },
		);
		const id = add(bench, `Add formation ${title}`, { name: title, ...made });
		if (id !== null) notices.say("done", note, "formation-came-in");
		return id;
	} catch (error) {
		notices.sayError(error);
		return null;
	}
}

/** The new formation is selected. */
function add({ edit, store }: Workbench, name: string, formation: NewFormation): string | null {
	const id = edit(name, (draft) => addFormation(draft, formation));
	if (typeof id !== "string") return null;
	store.setState({ selection: { kind: "formation", id } });
	return id;
}
