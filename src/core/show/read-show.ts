import * as v from "valibot";
import { StarstaveError } from "../units/index.ts";
import { requireReferences } from "./check-references.ts";
import { migrate } from "./migrate.ts";
import { toList, toOrdered } from "./ordered.ts";
import { parseJson } from "./parse-json.ts";
import { describeIssue } from "./schema/describe-issue.ts";
import { SHOW_FORMAT, SHOW_VERSION, type ShowFile, showFile } from "./schema/show-file.ts";
import type { Show } from "./show.ts";
import { layOut } from "./write-json.ts";

/**
 * Plain data → checked file content with every default filled in.
 * @throws StarstaveError one sentence with place, value and what would be right
 */
export function checkShowFile(content: unknown): ShowFile {
	const result = v.safeParse(showFile, content, { abortEarly: true, abortPipeEarly: true });
	if (!result.success) throw new StarstaveError("show", describeIssue(content, result.issues[0]));
	requireReferences(result.output);
	return result.output;
}

/** File → memory: lists become maps by id with an order. Unknown keys ride along. */
export function toShow(file: ShowFile): Show {
	const { format: _format, version: _version, formations, groups, cues, ...rest } = file;
	return { ...rest, formations: toOrdered(formations), groups: toOrdered(groups), cues: toOrdered(cues) };
}

/** Memory → file, keys in the schema's order, so that equal shows give equal bytes. */
export function toShowFile(show: Show): ShowFile {
	const { formations, groups, cues, ...rest } = show;
	return checkShowFile({
		format: SHOW_FORMAT,
		version: SHOW_VERSION,
		...rest,
		formations: toList(formations),
		groups: toList(groups),
		cues: toList(cues),
	});
}

/**
 * Text of a `*.starstave.json` → show.
 * @throws StarstaveError one sentence: what is wrong, where, what would be right; nothing half read is ever returned
 */
export function readShow(text: string): Show {
	return toShow(checkShowFile(migrate(parseJson(text))));
}

/**
 * Show → text of a `*.starstave.json`, ending in a line feed. Defaults are written out, so that a show stays as it is
 * when a later version has others. `readShow(writeShow(show))` equals `show`.
 * @throws StarstaveError where the show breaks its own schema: what could not be read back is never written
 */
export function writeShow(show: Show): string {
	return layOut(toShowFile(show));
}
