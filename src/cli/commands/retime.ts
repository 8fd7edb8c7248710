import { basename } from "node:path";
import { mapEdit, retimeAnswer, retimeShow } from "../../core/retime/index.ts";
import { StarstaveError } from "../../core/units/index.ts";
import type { Answer } from "../answer.ts";
import type { Arguments } from "../arguments.ts";
import { type Progress, secondsSince } from "../progress.ts";
import { readShowFile, requireShowPlace, writeShowFile } from "../shows.ts";
import { decodeOwnTrack, hearWhole } from "../tracks.ts";

export async function runRetime(given: Arguments, progress: Progress): Promise<Answer> {
	const [path, track] = given.operands;
	const out = given.values.get("--out") ?? "";
	requireShowPlace(out, given.switches.has("--force"));
	const { show, soundtrack } = readShowFile(path);
	const old = await decodeOwnTrack(show, path, soundtrack, given.values.get("--soundtrack"), progress);
	if (old === null) {
		const name = show.soundtrack?.file;
		const right =
			name === undefined ? "give the show a soundtrack first" : `put ${name} beside it, or name it with --soundtrack`;
		throw new StarstaveError("soundtrack", `${path} can't be retimed without its old soundtrack; ${right}.`);
	}
	const heard = await hearWhole(track, progress);
	const start = performance.now();
	const { beats, bars } = show.grid;
	const map = mapEdit(old, heard.samples, {
		onProgress: (share, stage) => progress.tell(share, stage),
		beats,
		downbeats: bars.map((bar) => beats[bar.beat]),
	});
	const mapped = secondsSince(start);
	const result = retimeShow(show, map, heard.soundtrack, heard.analysis);
	const json = retimeAnswer(map, result, { ...heard.timing, map: mapped, retime: secondsSince(start) - mapped });
	const stretches = map.stretches.map(({ kind, old: from, new: to }) => {
		const [a, b, c, d] = [...from, ...to].map((seconds) => seconds.toFixed(2));
		return `${kind.padEnd(9)}  old ${a} to ${b} s, new ${c} to ${d} s`;
	});
	if (map.verdict === "different") {
		return { code: 2, json, lines: [...result.notes, "Nothing is moved, and nothing is written."] };
	}
	writeShowFile(out, result.show, { name: basename(track), bytes: heard.bytes });
	const count = (status: string): number => result.cues.filter((cue) => cue.status === status).length;
	const lines = [
		...stretches,
		...result.notes,
		...result.cues
			.filter((cue) => cue.status !== "moved")
			.map((cue) => `Cue ${cue.number}: ${cue.status === "orphan" ? "orphan" : "to review"}. ${cue.reason}`),
		...result.offers.map((offer) => `Offered at ${offer.time.toFixed(2)} s: ${offer.reason}`),
		`${out}: ${count("moved")} cues moved, ${count("review")} to review, ${count("orphan")} orphans`,
	];
	return { code: result.needsReview ? 2 : 0, json, lines };
}
