import {
	framesOf,
	handOff,
	listFile,
	TIMECODE_RATES,
	type Timecode,
	type TimecodeRate,
} from "../../core/handoff/index.ts";
import { StarstaveError } from "../../core/units/index.ts";
import type { Answer } from "../answer.ts";
import { type Arguments, numberFlag } from "../arguments.ts";
import { requireEmptyFolder, writeFolder } from "../files.ts";
import { flyWhole } from "../fly.ts";
import type { Progress } from "../progress.ts";
import { readShowFile } from "../shows.ts";
import { hearCurves } from "../tracks.ts";

function timecodeOf(given: Arguments): Timecode {
	const rate = given.values.get("--timecode") ?? "25";
	if (!(TIMECODE_RATES as readonly string[]).includes(rate)) {
		throw new StarstaveError("command", `--timecode is ${rate}, but must be one of ${TIMECODE_RATES.join(", ")}.`);
	}
	const start = given.values.get("--timecode-start") ?? "01:00:00:00";
	framesOf(start, rate as TimecodeRate);
	return { rate: rate as TimecodeRate, start };
}

export async function runHandoff(given: Arguments, progress: Progress): Promise<Answer> {
	const [path] = given.operands;
	const out = given.values.get("--out") ?? "";
	const rate = numberFlag(given, "--rate", 10, { least: 1, most: 100, whole: true });
	const lightRate = numberFlag(given, "--light-rate", 50, { least: 1, most: 200, whole: true });
	const timecode = timecodeOf(given);
	const draft = given.switches.has("--draft");
	requireEmptyFolder(out);
	const { show, soundtrack } = readShowFile(path);
	const curves = await hearCurves(show, path, soundtrack, given.values.get("--soundtrack"), progress);
	const flown = await flyWhole(show, curves, progress);
	if (!flown.check.flies && !draft) {
		const json = { flies: false, written: false, files: [], revision: null };
		const lines = [
			"The show can't be flown as it stands, so nothing is written; check says why, and --draft hands off everything but flight paths and light.",
		];
		return { code: 2, json, lines };
	}
	const result = handOff(flown, { rate, lightRate, draft, timecode, notes: flown.notes }, (share, stage) =>
		progress.tell(share, stage),
	);
	if (result.files.length === 0) {
		const json = {
			flies: flown.check.flies,
			written: false,
			files: [],
			revision: result.revision,
			notes: result.notes,
		};
		return { code: 2, json, lines: [...result.notes, "Nothing is written."] };
	}
	writeFolder(out, result.files);
	const files = result.files.map(listFile);
	const json = {
		flies: flown.check.flies,
		written: true,
		revision: result.revision,
		draft: result.draft,
		rates: result.rates,
		files,
		notes: result.notes,
	};
	const lines = [
		`Revision ${result.revision}${result.draft ? " (draft: no flight paths)" : ""}`,
		...files.map(({ name, bytes, sha256 }) => `${sha256}  ${name}  ${bytes} bytes`),
		...result.notes,
	];
	return { code: flown.check.flies ? 0 : 2, json, lines };
}
