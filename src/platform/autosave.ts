import { type DBSchema, type IDBPDatabase, openDB } from "idb";
import { StarstaveError } from "../core/units/index.ts";

/** A show as the browser keeps it: the file's content as plain data, with what else stood around it. */
export interface KeptShow {
	/** Content of a `*.starstave.json`, of whatever version wrote it. */
	readonly content: unknown;
	readonly title: string;
	readonly fileName: string | null;
	readonly unsaved: boolean;
	/** Hash of the soundtrack whose bytes are kept beside it. */
	readonly soundtrack: string | null;
}

export interface KeptSoundtrack {
	readonly name: string;
	readonly bytes: Uint8Array;
}

/** `current` is the show that stands open, `previous` the one that stood here before. */
export type Slot = "current" | "previous";
/** Things that can be computed again and are kept by content hash. */
export type Shelf = "plans" | "analyses";

/** Keeps the work in the browser. Every call may throw a StarstaveError of area "storage". */
export interface Autosave {
	readShow(slot: Slot): Promise<KeptShow | null>;
	writeShow(slot: Slot, show: KeptShow): Promise<void>;
	readSoundtrack(sha256: string): Promise<KeptSoundtrack | null>;
	writeSoundtrack(sha256: string, soundtrack: KeptSoundtrack): Promise<void>;
	/** Takes away every soundtrack that no kept show names. */
	sweepSoundtracks(): Promise<void>;
	/** What is there of those keys. It is as it was written by whatever version: whoever reads it looks at it closely. */
	readShelf(shelf: Shelf, keys: readonly string[]): Promise<Map<string, unknown>>;
	/** Puts something on a shelf; the ones read or written longest ago make room. */
	writeShelf(shelf: Shelf, key: string, value: unknown): Promise<void>;
	close(): void;
}

const DATABASE = "starstave";
/** Rises when the stores below change. A database of a higher version was made by a newer program: nothing is read. */
const DATABASE_VERSION = 1;
/** Entries kept on each shelf: some ten shows' plans. */
const SHELF_ROOM: Record<Shelf, number> = { plans: 400, analyses: 8 };

interface Shelved {
	readonly value: unknown;
	/** Rising count of writes, so that the oldest can be told without a clock. */
	readonly turn: number;
}
interface Stores extends DBSchema {
	shows: { key: Slot; value: KeptShow };
	soundtracks: { key: string; value: KeptSoundtrack };
	plans: { key: string; value: Shelved; indexes: { turn: number } };
	analyses: { key: string; value: Shelved; indexes: { turn: number } };
}

/** @throws StarstaveError where the browser keeps nothing, or a newer program has been here */
export async function openAutosave(name = DATABASE): Promise<Autosave> {
	let db: IDBPDatabase<Stores>;
	try {
		db = await openDB<Stores>(name, DATABASE_VERSION, {
			upgrade: (fresh) => {
				fresh.createObjectStore("shows");
				fresh.createObjectStore("soundtracks");
				for (const shelf of ["plans", "analyses"] as const) fresh.createObjectStore(shelf).createIndex("turn", "turn");
			},
			// A newer program in another tab wants to change the stores: let go, it has the say.
			blocking: (_current, _blocked, event) => (event.target as IDBDatabase).close(),
		});
	} catch (error) {
		throw explain(error);
	}
	const guard = async <T>(work: () => Promise<T>): Promise<T> => {
		try {
			return await work();
		} catch (error) {
			throw explain(error);
		}
	};

	return {
		readShow: (slot) => guard(async () => (await db.get("shows", slot)) ?? null),
		writeShow: (slot, show) => guard(async () => void (await db.put("shows", show, slot))),
		readSoundtrack: (sha256) => guard(async () => (await db.get("soundtracks", sha256)) ?? null),
		writeSoundtrack: (sha256, soundtrack) =>
			guard(async () => {
				if ((await db.getKey("soundtracks", sha256)) === undefined) await db.put("soundtracks", soundtrack, sha256);
			}),
		sweepSoundtracks: () =>
			guard(async () => {
				const kept = new Set((await db.getAll("shows")).map((show) => show.soundtrack));
				for (const key of await db.getAllKeys("soundtracks")) if (!kept.has(key)) await db.delete("soundtracks", key);
			}),
		readShelf: (shelf, keys) =>
			guard(async () => {
				const transaction = db.transaction(shelf);
				const found = await Promise.all(keys.map((key) => transaction.store.get(key)));
				const held = new Map<string, unknown>();
				found.forEach((entry, i) => {
					if (entry !== undefined) held.set(keys[i], entry.value);
				});
				return held;
			}),
		writeShelf: (shelf, key, value) =>
			guard(async () => {
				const transaction = db.transaction(shelf, "readwrite");
				const index = transaction.store.index("turn");
				const last = await index.openKeyCursor(null, "prev");
				const turn = last === null ? 1 : (last.key as number) + 1;
				await transaction.store.put({ value, turn }, key);
				let over = (await transaction.store.count()) - SHELF_ROOM[shelf];
				for (let cursor = await index.openCursor(); cursor !== null && over > 0; over--) {
					await cursor.delete();
					cursor = await cursor.continue();
				}
				await transaction.done;
			}),
		close: () => db.close(),
	};
}

function explain(error: unknown): StarstaveError {
	if (error instanceof StarstaveError) return error;
	const name = error instanceof DOMException ? error.name : "";
	if (name === "VersionError") {
		return new StarstaveError(
			"storage",
			"A newer version of this program has kept a show in this browser; nothing of it is read or written over. Reload the page to get the newer program.",
			{ cause: error },
		);
	}
	if (name === "QuotaExceededError") {
		return new StarstaveError(
			"storage",
			"The browser has no room left to keep this show; save it to a file, and free some room on this machine.",
			{ cause: error },
		);
	}
	return new StarstaveError(
		"storage",
		"The browser doesn't keep anything for this page (a private window, perhaps); save the show to a file.",
		{ cause: error },
	);
}
