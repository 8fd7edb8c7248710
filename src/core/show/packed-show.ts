import { strFromU8, strToU8, type UnzipFileInfo, unzipSync, type Zippable, zipSync } from "fflate";
import { StarstaveError } from "../units/index.ts";
import { readShow, writeShow } from "./read-show.ts";
import type { Show } from "./show.ts";

/** Name of the show inside a `*.starstave`. */
const ROUTINE = "routine.json";
/** Bytes and entries that are unpacked at most: a soundtrack of three hours in FLAC, and a show of 20 000 drones. */
const LARGEST_SOUNDTRACK = 1_000_000_000;
const LARGEST_ROUTINE = 200_000_000;
const MOST_ENTRIES = 16;
/** Zip can't hold times before 1980; equal shows give equal bytes, so every entry has this one. */
const ZIP_TIME = "1980-01-01T00:00:00";

/** A show with the soundtrack that lies beside it in the zip. */
export interface PackedShow {
	readonly show: Show;
	readonly soundtrack: { readonly name: string; readonly bytes: Uint8Array } | null;
}

function refuse(sentence: string): never {
	throw new StarstaveError("show", sentence);
}

function baseName(path: string): string {
	return path.slice(Math.max(path.lastIndexOf("/"), path.lastIndexOf("\\")) + 1);
}

/** Show and soundtrack → bytes of a `*.starstave`. The soundtrack is packed as it is: audio is compressed already. */
export function packShow({ show, soundtrack }: PackedShow): Uint8Array {
	const entries: Zippable = { [ROUTINE]: [strToU8(writeShow(show)), { level: 6, mtime: ZIP_TIME }] };
	if (soundtrack !== null) {
		const name = baseName(soundtrack.name);
		if (name === "" || name === ROUTINE)
			refuse(`A soundtrack can't be packed under the name "${name}"; rename the file.`);
		entries[name] = [soundtrack.bytes, { level: 0, mtime: ZIP_TIME }];
	}
	return zipSync(entries);
}

/**
 * Bytes of a `*.starstave` → show and soundtrack. Counts and sizes are looked at before anything is unpacked, and of
 * each entry's path only the base name is used.
 * @throws StarstaveError no zip, no `routine.json`, too many or too large entries, or what `readShow` refuses
 */
export function unpackShow(bytes: Uint8Array): PackedShow {
	let count = 0;
	const accept = (entry: UnzipFileInfo): boolean => {
		count += 1;
		if (count > MOST_ENTRIES) refuse(`The show's zip holds more than ${MOST_ENTRIES} files; a show has two.`);
		const most = baseName(entry.name) === ROUTINE ? LARGEST_ROUTINE : LARGEST_SOUNDTRACK;
		if (entry.originalSize > most || entry.size > most) {
			refuse(
				`${baseName(entry.name)} in the show's zip takes ${entry.originalSize} bytes; at most ${most} are unpacked.`,
			);
		}
		return !entry.name.endsWith("/");
	};
	let entries: Record<string, Uint8Array>;
	try {
		entries = unzipSync(bytes, { filter: accept });
	} catch (error) {
		if (error instanceof StarstaveError) throw error;
		throw new StarstaveError("show", "The file is no whole zip; open a file that was saved as a show.", {
			cause: error,
		});
	}
	const byName = new Map(Object.entries(entries).map(([path, held]) => [baseName(path), held]));
	const routine = byName.get(ROUTINE);
	if (routine === undefined) refuse(`The zip holds no ${ROUTINE}, so it is no show; open a *.starstave file.`);
	const show = readShow(strFromU8(routine));
	const name = show.soundtrack?.file;
	const audio = name === undefined ? undefined : byName.get(name);
	return { show, soundtrack: name === undefined || audio === undefined ? null : { name, bytes: audio } };
}
