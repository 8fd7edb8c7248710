import { basename } from "node:path";
import { mapEdit, retimeShow } from "../../core/retime/index.ts";
import { StarstaveError } from "../../core/units/index.ts";
import type { Answer } from "../answer.ts";
import type { Arguments, CommandShape } from "../arguments.ts";
import { type Progress, secondsSince } from "../progress.ts";
import { readShowFile, requireShowPlace, writeShowFile } from "../shows.ts";
import { decodeOwnTrack, hearFile } from "../tracks.ts";

export const retimeShape: CommandShape = {
	name: "retime",
	summary: "carry the cues over to a new edit of the soundtrack; 2 when anything needs review",
	operands: ["SHOW", "TRACK"],
	flags: [
		{ name: "--out", value: "SHOW", help: "where the retimed show goes; the old one is left as it is" },
		{ name: "--soundtrack", value: "FILE", help: "the show's old audio, where it doesn't lie beside the show" },
		{ name: "--force", value: null, help: "replace the show that stands there" },
		{ name: "--json", value: "FILE|-", help: "write the answer as JSON to a file, or to stdout" },
	],
	required: ["--out"],
	more: ["TRACK is the new edit. Both soundtracks are heard, so the old one must be at hand."],
};

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
	const heard = await hearFile(track, progress);
	const start = performance.now();
	const map = mapEdit(old, heard.samples, (share) => progress.tell(share, "comparing old and new"));
	const mapped = secondsSince(start);
	const retimed = retimeShow(show, map, heard.soundtrack, heard.analysis);
	const timing = { ...heard.timing, map: mapped, retime: secondsSince(start) - mapped };
	writeShowFile(out, retimed.show, { name: basename(track), bytes: heard.bytes });
	const count = (status: string): number => retimed.cues.filter((cue) => cue.status === status).length;
	const json = {
		verdict: map.verdict,
		map: map.stretches.map(({ kind, old: from, new: to, rate, confidence }) => ({
			kind,
			old: from,
			new: to,
			rate,
			confidence,
		})),
		cues: retimed.cues,
		notes: map.notes,
		timing,
	};
	const lines = [
		...map.stretches.map(
			({ kind, old: from, new: to }) =>
				`${kind.padEnd(9)} ${from[0].toFixed(2)} to ${from[1].toFixed(2)} s became ${to[0].toFixed(2)} to ${to[1].toFixed(2)} s`,
		),
		...map.notes,
		`${out}: ${count("moved")} cues moved, ${count("review")} to review, ${count("orphan")} orphans`,
		...retimed.cues.filter((cue) => cue.status !== "moved").map((cue) => `${cue.id}: ${cue.status}, ${cue.reason}`),
	];
	return { code: retimed.cues.every((cue) => cue.status === "moved") ? 0 : 2, json, lines };
}
