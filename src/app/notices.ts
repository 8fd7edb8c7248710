import type { StoreApi } from "zustand/vanilla";
import { StarstaveError } from "../core/units/index.ts";
import type { Notice, StudioState } from "./studio-state.ts";

/** Sentences for the user. */
export interface Notices {
	/** @param id a notice of the same id is replaced; left out: a notice of its own, unless it says what one says already */
	say(kind: Notice["kind"], text: string, id?: string): void;
	/** What went wrong, as a sentence. Cancelling is nothing that went wrong. */
	sayError(error: unknown, id?: string): void;
	dismiss(id: string): void;
}

export function isCancelled(error: unknown): boolean {
	return error instanceof DOMException && error.name === "AbortError";
}

export function createNotices(store: StoreApi<StudioState>): Notices {
	let last = 0;
	const notices: Notices = {
		say: (kind, text, id) => {
			const { notices } = store.getState();
			const others = notices.filter((notice) => (id === undefined ? notice.text !== text : notice.id !== id));
			store.setState({ notices: [...others, { id: id ?? `n${++last}`, kind, text }] });
		},
		sayError: (error, id) => {
			if (isCancelled(error)) return;
			if (error instanceof StarstaveError) return notices.say("error", error.message, id);
			// A fault of the program, not of the user: the whole of it goes where a developer looks.
			console.error(error);
			const message = error instanceof Error ? error.message : String(error);
			notices.say("error", `Something in the program went wrong, and the show stays as it was: ${message}`, id);
		},
		dismiss: (id) => {
			store.setState((state) => ({ notices: state.notices.filter((notice) => notice.id !== id) }));
		},
	};
	return notices;
}
