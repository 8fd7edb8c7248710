import { type EditResult, patchShow, type Show } from "../core/show/index.ts";

type Patches = EditResult["patches"];

interface Step {
	/** As the user reads it: "Move cue 12". */
	readonly name: string;
	readonly patches: Patches;
	readonly inverse: Patches;
}

/** What was done to the show, to be taken back and brought again. Each method that walks answers with the new show. */
export interface History {
	push(name: string, edit: Pick<EditResult, "patches" | "inverse">): void;
	undo(show: Show): Show | null;
	redo(show: Show): Show | null;
	clear(): void;
	readonly undoName: string | null;
	readonly redoName: string | null;
}

/** Steps that are kept: more than a long working day makes. */
const MOST_STEPS = 5000;

export function createHistory(): History {
	let done: Step[] = [];
	let undone: Step[] = [];
	return {
		push: (name, { patches, inverse }) => {
			done.push({ name, patches, inverse });
			if (done.length > MOST_STEPS) done.shift();
			undone = [];
		},
		undo: (show) => {
			const step = done.pop();
			if (step === undefined) return null;
			undone.push(step);
			return patchShow(show, step.inverse);
		},
		redo: (show) => {
			const step = undone.pop();
			if (step === undefined) return null;
			done.push(step);
			return patchShow(show, step.patches);
		},
		clear: () => {
			done = [];
			undone = [];
		},
		get undoName() {
			return done.at(-1)?.name ?? null;
		},
		get redoName() {
			return undone.at(-1)?.name ?? null;
		},
	};
}
