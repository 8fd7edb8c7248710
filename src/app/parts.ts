import type { Autosave } from "../platform/autosave.ts";
import type { Files, NamedBytes } from "../platform/files.ts";
import type { Lease } from "../platform/lease.ts";
import type { Player, Sound } from "../platform/player.ts";
import type { WorkerClient } from "../workers/index.ts";

/** What the studio is made from; a test hands in its own. */
export interface StudioParts {
	readonly workers: WorkerClient;
	readonly player: Player;
	readonly files: Files;
	/** Opens the autosave; throws a StarstaveError where the browser keeps nothing or a newer program has been here. */
	readonly openAutosave: () => Promise<Autosave>;
	readonly takeLease: () => Promise<Lease>;
	/** The demo show with its soundtrack, each as a file; null where none is shipped. */
	readonly fetchDemo: (() => Promise<{ readonly show: NamedBytes; readonly soundtrack: NamedBytes | null }>) | null;
	/** Decodes what only a browser can (AAC); null where there is none. */
	readonly decodeInBrowser: ((bytes: Uint8Array) => Promise<Sound>) | null;
}
