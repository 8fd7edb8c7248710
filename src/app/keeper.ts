import type { StoreApi } from "zustand/vanilla";
import { SHOW_FORMAT, SHOW_VERSION, type Show, toList } from "../core/show/index.ts";
import type { Autosave, KeptShow, Shelf, Slot } from "../platform/autosave.ts";
import type { NamedBytes } from "../platform/files.ts";
import type { Notices } from "./notices.ts";
import type { StudioState } from "./studio-state.ts";

/** Keeps the show in the browser after every edit. Where it can't, it says so once and goes on without. */
export interface Keeper {
	/** From now on everything is kept there; null: nothing is kept any more. */
	attach(autosave: Autosave | null): void;
	/** The show has changed: it is kept in a moment, a run of changes once. */
	touch(): void;
	/** Keeps what is still waiting. */
	flush(): Promise<void>;
	keepSoundtrack(sha256: string, soundtrack: NamedBytes): Promise<void>;
	/** The show that stands here moves to the place of the one before it. */
	setAside(): Promise<boolean>;
	read(slot: Slot): Promise<KeptShow | null>;
	readSoundtrack(sha256: string): Promise<NamedBytes | null>;
	readShelf(shelf: Shelf, keys: readonly string[]): Promise<Map<string, unknown>>;
	writeShelf(shelf: Shelf, key: string, value: unknown): void;
}

/** Milliseconds from an edit until it is kept. */
const DELAY = 250;

export function createKeeper(store: StoreApi<StudioState>, notices: Notices): Keeper {
	let autosave: Autosave | null = null;
	let timer: ReturnType<typeof setTimeout> | null = null;
	// Writes go one after the other, so that an older show never lands on a newer one.
	let line: Promise<void> = Promise.resolve();

	const queue = (work: (to: Autosave) => Promise<void>): Promise<void> => {
		const to = autosave;
		if (to === null) return Promise.resolve();
		line = line.then(() => work(to)).catch((error) => notices.sayError(error, "storage"));
		return line;
	};

	const write = (): Promise<void> => {
		const state = store.getState();
		if (state.show === null || state.readOnly !== null) return Promise.resolve();
		const kept = toKept(state, state.show);
		return queue((to) => to.writeShow("current", kept));
	};

	const ask = async <T>(work: (from: Autosave) => Promise<T>, otherwise: T): Promise<T> => {
		if (autosave === null) return otherwise;
		try {
			return await work(autosave);
		} catch (error) {
			notices.sayError(error, "storage");
			return otherwise;
		}
	};

	const keeper: Keeper = {
		attach: (to) => {
			autosave = to;
		},
		touch: () => {
			if (timer === null && autosave !== null) {
				timer = setTimeout(() => {
					timer = null;
					void write();
				}, DELAY);
			}
		},
		flush: async () => {
			if (timer !== null) {
				clearTimeout(timer);
				timer = null;
				await write();
			}
			await line;
		},
		keepSoundtrack: (sha256, soundtrack) => queue((to) => to.writeSoundtrack(sha256, soundtrack)),
		setAside: async () => {
			const { show, readOnly } = store.getState();
			if (autosave === null || show === null || readOnly !== null) return false;
			await keeper.flush();
			const kept = toKept(store.getState(), show);
			await queue(async (to) => {
				await to.writeShow("previous", kept);
				await to.sweepSoundtracks();
			});
			return true;
		},
		read: (slot) => ask((from) => from.readShow(slot), null),
		readSoundtrack: (sha256) => ask((from) => from.readSoundtrack(sha256), null),
		readShelf: (shelf, keys) => ask((from) => from.readShelf(shelf, keys), new Map()),
		writeShelf: (shelf, key, value) => void queue((to) => to.writeShelf(shelf, key, value)),
	};
	return keeper;
}

/** The file's content as plain data, which the browser copies faster than text could be written. */
function toKept({ fileName, unsaved }: StudioState, show: Show): KeptShow {
	const { formations, groups, cues, ...rest } = show;
	const content = {
		...rest,
		format: SHOW_FORMAT,
		version: SHOW_VERSION,
		formations: toList(formations),
		groups: toList(groups),
		cues: toList(cues),
	};
	return { content, title: show.title, fileName, unsaved, soundtrack: show.soundtrack?.sha256 ?? null };
}
