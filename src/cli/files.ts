import {
	closeSync,
	fstatSync,
	fsyncSync,
	mkdirSync,
	openSync,
	readdirSync,
	readFileSync,
	readSync,
	renameSync,
	rmSync,
	statSync,
	writeSync,
} from "node:fs";
import { basename, dirname, join, resolve } from "node:path";
import { StarstaveError } from "../core/units/index.ts";

function reasonOf(error: unknown): string {
	const code = error instanceof Error && "code" in error ? String(error.code) : "";
	switch (code) {
		case "ENOENT":
			return "there is no such file or folder";
		case "EACCES":
		case "EPERM":
			return "it may not be opened";
		case "EISDIR":
			return "it is a folder";
		case "ENOTDIR":
			return "part of its path is a file";
		case "ENOSPC":
			return "the disk is full";
		default:
			return code === "" ? String(error) : code;
	}
}

/** @throws StarstaveError one sentence with the path as the user gave it */
export function readBytes(path: string): Uint8Array {
	try {
		return readFileSync(path);
	} catch (error) {
		throw new StarstaveError("command", `${path} can't be read: ${reasonOf(error)}.`, { cause: error });
	}
}

/** A file that is read piece by piece. */
export interface OpenFile {
	/** Bytes. */
	readonly size: number;
	/** Bytes `from` … `to`. @throws StarstaveError as `readBytes` does */
	read(from: number, to: number): Uint8Array;
	close(): void;
}

/** @throws StarstaveError one sentence with the path as the user gave it */
export function openFile(path: string): OpenFile {
	const attempt = <T>(work: () => T): T => {
		try {
			return work();
		} catch (error) {
			throw new StarstaveError("command", `${path} can't be read: ${reasonOf(error)}.`, { cause: error });
		}
	};
	const file = attempt(() => openSync(path, "r"));
	const read = (from: number, to: number): Uint8Array => {
		const bytes = new Uint8Array(to - from);
		for (let at = 0; at < bytes.length; ) {
			const count = readSync(file, bytes, at, bytes.length - at, from + at);
			if (count === 0) return bytes.subarray(0, at); // it has become shorter meanwhile
			at += count;
		}
		return bytes;
	};
	return {
		// A folder opens, but can't be read.
		size: attempt(() => {
			read(0, 1);
			return fstatSync(file).size;
		}),
		read: (from, to) => attempt(() => read(from, to)),
		close: () => closeSync(file),
	};
}

export function exists(path: string): boolean {
	return statSync(path, { throwIfNoEntry: false }) !== undefined;
}

/** @throws StarstaveError where the file stands and may not be replaced; asked before the work, not after it */
export function requireFree(path: string, force: boolean): void {
	const standing = statSync(path, { throwIfNoEntry: false });
	if (standing?.isDirectory()) throw new StarstaveError("command", `${path} is a folder; name a file.`);
	if (standing !== undefined && !force) {
		throw new StarstaveError("command", `${path} exists; add --force to replace it, or name another file.`);
	}
	const folder = dirname(resolve(path));
	if (!statSync(folder, { throwIfNoEntry: false })?.isDirectory()) {
		throw new StarstaveError(
			"command",
			`${path} can't be written: there is no folder ${dirname(path)}; make it first.`,
		);
	}
}

/** Writes beside the target and renames: whoever looks sees the old file or the new one, never half of either. */
export function writeBytes(path: string, bytes: Uint8Array | string): void {
	const beside = join(dirname(resolve(path)), `.${basename(path)}.${process.pid}.part`);
	try {
		const file = openSync(beside, "wx");
		try {
			const whole = typeof bytes === "string" ? Buffer.from(bytes) : bytes;
			for (let at = 0; at < whole.length; ) at += writeSync(file, whole, at);
			fsyncSync(file);
		} finally {
			closeSync(file);
		}
		renameSync(beside, path);
	} catch (error) {
		rmSync(beside, { force: true });
		throw new StarstaveError("command", `${path} can't be written: ${reasonOf(error)}.`, { cause: error });
	}
}

/** @throws StarstaveError unless the folder is empty or doesn't exist yet */
export function requireEmptyFolder(path: string): void {
	const standing = statSync(path, { throwIfNoEntry: false });
	if (standing === undefined) {
		const parent = dirname(resolve(path));
		if (statSync(parent, { throwIfNoEntry: false })?.isDirectory()) return;
		throw new StarstaveError("command", `${path} can't be made: there is no folder ${dirname(path)}; make it first.`);
	}
	if (!standing.isDirectory()) throw new StarstaveError("command", `${path} is a file; name an empty or new folder.`);
	if (readdirSync(path).length > 0) {
		throw new StarstaveError("command", `${path} is not empty; name an empty or new folder.`);
	}
}

/**
 * Writes a whole folder: everything goes into a folder beside it, which then takes the name. Where anything fails,
 * nothing is left.
 */
export function writeFolder(
	path: string,
	files: readonly { readonly name: string; readonly bytes: Uint8Array }[],
): void {
	const target = resolve(path);
	const beside = join(dirname(target), `.${basename(target)}.${process.pid}.part`);
	try {
		mkdirSync(beside);
		for (const { name, bytes } of files) writeBytes(join(beside, basename(name)), bytes);
		// An empty folder gives way; rename refuses one that was filled in the meantime.
		renameSync(beside, target);
	} catch (error) {
		rmSync(beside, { recursive: true, force: true });
		if (error instanceof StarstaveError) throw error;
		throw new StarstaveError("command", `${path} can't be written: ${reasonOf(error)}.`, { cause: error });
	}
}
