import { roughCut } from "../../core/draft/index.ts";
import { toList } from "../../core/show/index.ts";
import type { Answer } from "../answer.ts";
import { type Arguments, numberFlag } from "../arguments.ts";
import { readBytes } from "../files.ts";
import { flyWhole } from "../fly.ts";
import type { Progress } from "../progress.ts";
import { requireShowPlace, writeShowFile } from "../shows.ts";
import { hearFile } from "../tracks.ts";
import { checkLines, describeCheck } from "./check.ts";

export async function runDraft(given: Arguments, progress: Progress): Promise<Answer> {
	const [path] = given.operands;
	const out = given.values.get("--out") ?? "";
	const drones = numberFlag(given, "--drones", 0, { least: 1, most: 20000, whole: true });
	const seed = numberFlag(given, "--seed", 1, { least: 0, most: 2 ** 31 - 1, whole: true });
	requireShowPlace(out, given.switches.has("--force"));
	const track = await hearFile(path, progress);
	const title = given.values.get("--title") ?? track.soundtrack.file.replace(/\.[^.]+$/, "");
	const cut = roughCut(track.analysis, track.soundtrack, { drones, title, seed }, (share, stage) =>
		progress.tell(share, stage),
	);
	const { show } = cut;
	// What was cut is checked from the show alone, as `check` would from the file.
	const flown = await flyWhole(show, track.analysis.curves, progress, cut.plans);
	writeShowFile(out, show, { name: track.soundtrack.file, bytes: readBytes(path) });
	const cues = { colour: 0, intensity: 0, transition: 0 };
	for (const cue of toList(show.cues)) cues[cue.kind] += 1;
	const json = {
		cues,
		check: describeCheck(flown),
		notes: cut.notes,
		soundtrack: track.soundtrack,
		timing: track.timing,
	};
	const lines = [
		`${out}: ${cues.transition} transitions, ${cues.colour} colour cues, ${cues.intensity} intensity cues`,
		...cut.notes,
		...checkLines(show, flown),
	];
	return { code: flown.check.flies ? 0 : 2, json, lines };
}
