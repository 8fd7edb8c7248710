import { StarstaveError } from "../units/index.ts";
import { SHOW_FORMAT, SHOW_VERSION } from "./schema/show-file.ts";

/** The content of a show file of some version, before the schema has seen it. */
export type RawShow = Readonly<Record<string, unknown>>;
/** Entry i turns version i + 1 into version i + 2. Once shipped, a step is never changed. */
export type MigrationStep = (file: RawShow) => RawShow;

/** Version 1 is the first that was ever written, so nothing older has to be carried over yet. */
export const MIGRATION_STEPS: readonly MigrationStep[] = [];

/**
 * Version of a show file's content, without reading the rest: whoever writes asks this first, since a newer file is
 * never written over.
 * @returns null where the content is no show at all
 */
export function versionOf(content: unknown): number | null {
	if (content === null || typeof content !== "object") return null;
	const { format, version } = content as RawShow;
	return format === SHOW_FORMAT && typeof version === "number" ? version : null;
}

/**
 * Carries an older file's content to the newest version, a step at a time.
 * @param content what the JSON held
 * @throws StarstaveError no show, no version, or a version newer than this program
 */
export function migrate(
	content: unknown,
	steps: readonly MigrationStep[] = MIGRATION_STEPS,
	newest: number = SHOW_VERSION,
): RawShow {
	if (content === null || typeof content !== "object" || Array.isArray(content)) {
		throw new StarstaveError("show", "The file holds no show; open a *.starstave.json or *.starstave file.");
	}
	let file: RawShow = content as RawShow;
	if (file.format !== SHOW_FORMAT) {
		const found = file.format === undefined ? "missing" : JSON.stringify(file.format);
		throw new StarstaveError("show", `The file holds no show: format is ${found}, but must be "${SHOW_FORMAT}".`);
	}
	const version = file.version;
	if (typeof version !== "number" || !Number.isInteger(version) || version < 1) {
		const found = version === undefined ? "missing" : JSON.stringify(version);
		throw new StarstaveError("show", `The show's version is ${found}, but must be a whole number from 1 to ${newest}.`);
	}
	if (version > newest) {
		throw new StarstaveError(
			"show",
			`The show was saved by a newer program: its version is ${version} and this one reads up to ${newest}; update the program (the file is left as it is).`,
		);
	}
	for (let at = version; at < newest; at++) file = { ...steps[at - 1](file), version: at + 1 };
	return file;
}
