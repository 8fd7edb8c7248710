import { basename } from "node:path";
import {
	type PackedShow,
	packShow,
	readShow,
	SHOW_VERSION,
	type Show,
	unpackShow,
	versionOf,
	writeShow,
} from "../core/show/index.ts";
import { StarstaveError } from "../core/units/index.ts";
import { exists, readBytes, requireFree, writeBytes } from "./files.ts";

function isZip(bytes: Uint8Array): boolean {
	return bytes[0] === 0x50 && bytes[1] === 0x4b && bytes[2] < 0x09;
}

function isPackedName(path: string): boolean {
	return path.toLowerCase().endsWith(".starstave");
}

/** Puts the file's name in front of whatever is wrong inside it. */
function inFile<T>(path: string, read: () => T): T {
	try {
		return read();
	} catch (error) {
		if (!(error instanceof StarstaveError)) throw error;
		throw new StarstaveError(error.area, `${path}: ${error.message}`, { cause: error });
	}
}

/**
 * A show from a file: JSON, or the zip that also holds the soundtrack; told apart by its first bytes.
 * @throws StarstaveError the path, then one sentence of what is wrong in it
 */
export function readShowFile(path: string): PackedShow {
	const bytes = readBytes(path);
	return inFile(path, () => {
		if (isZip(bytes)) return unpackShow(bytes);
		let text: string;
		try {
			text = new TextDecoder("utf-8", { fatal: true }).decode(bytes);
		} catch (error) {
			throw new StarstaveError(
				"show",
				"The file is not UTF-8 text, so it holds no show; open a *.starstave.json or *.starstave file.",
				{
					cause: error,
				},
			);
		}
		return { show: readShow(text), soundtrack: null };
	});
}

/**
 * Asked before the work: may a show be written there? A show that a newer program saved is never written over, not even
 * by force.
 */
export function requireShowPlace(path: string, force: boolean): void {
	requireFree(path, force);
	if (!exists(path)) return;
	const bytes = readBytes(path);
	if (isZip(bytes)) {
		try {
			unpackShow(bytes);
		} catch (error) {
			if (error instanceof StarstaveError && /newer program/.test(error.message)) refuseNewer(path);
		}
		return;
	}
	let content: unknown = null;
	try {
		content = JSON.parse(new TextDecoder().decode(bytes));
	} catch {
		return;
	}
	const version = versionOf(content);
	if (version !== null && version > SHOW_VERSION) refuseNewer(path);
}

function refuseNewer(path: string): never {
	throw new StarstaveError(
		"show",
		`${path} was saved by a newer program and is never written over; name another file.`,
	);
}

/** Writes JSON, or the zip with the soundtrack where the name ends in .starstave. */
export function writeShowFile(path: string, show: Show, soundtrack: PackedShow["soundtrack"]): void {
	if (!isPackedName(path)) {
		writeBytes(path, writeShow(show));
		return;
	}
	const packed = soundtrack === null ? null : { name: basename(soundtrack.name), bytes: soundtrack.bytes };
	writeBytes(path, packShow({ show, soundtrack: packed }));
}
