import { type Remedy, sayCare, type TransitionCheck } from "../../core/flight/index.ts";
import { flashSentence } from "../../core/handoff/index.ts";
import { find, type Show } from "../../core/show/index.ts";
import type { Answer } from "../answer.ts";
import type { Arguments } from "../arguments.ts";
import { findRemedies, type Mended } from "../find-remedies.ts";
import { type Flown, flyWhole } from "../fly.ts";
import type { Progress } from "../progress.ts";
import { readShowFile } from "../shows.ts";
import { hearCurves } from "../tracks.ts";

/** The check under the keys of the JSON answer. */
export function describeCheck(flown: Flown) {
	const { check, care, flashes, notes, timing } = flown;
	const transitions = check.transitions.map((one) => ({ ...one, remedies: one.remedies.map(describeRemedy) }));
	return { ...check, transitions, care, flashes, notes: [...check.notes, ...notes], timing };
}

/** Without the picture that the app shows of it. */
function describeRemedy({ ghost: _ghost, ...remedy }: Remedy): Omit<Remedy, "ghost"> {
	return remedy;
}

function legLine(show: Show, leg: TransitionCheck): string {
	const cue = find(show.cues, leg.id);
	const name = cue === undefined ? leg.id : `Cue ${cue.number}`;
	const needed = leg.needed === null ? "no time is enough" : `needs ${leg.needed.toFixed(2)} s`;
	const gap = leg.gap === null ? "" : `, gap ${leg.gap.distance.toFixed(3)} m`;
	return `${name}: ${leg.verdicts.join(" ")}, ${needed} of ${leg.available.toFixed(2)} s${gap}`;
}

const remedyLine = ({ change, cost }: Remedy): string => `  ${change} ${cost}`;

/** The check in lines for people: every leg, what is wrong beside them, the answer last. */
export function checkLines(show: Show, flown: Flown, mended: Mended["formations"] = []): string[] {
	const { check, care, flashes, notes } = flown;
	const legs = [check.launch, ...check.transitions, check.landing].filter((leg) => leg !== null);
	const { airborne, limit } = check.endurance;
	const lines = legs.flatMap((leg) => [legLine(show, leg), ...leg.remedies.map(remedyLine)]);
	for (const { id, gap, verdicts } of check.formations) {
		if (verdicts.includes("flies")) continue;
		const name = find(show.formations, id)?.name || id;
		lines.push(`Formation ${name}: ${verdicts.join(" ")}, smallest distance ${gap.toFixed(3)} m`);
		lines.push(...(mended.find((one) => one.id === id)?.remedies ?? []).map(remedyLine));
	}
	lines.push(`Endurance: ${airborne.toFixed(0)} s from motor start, limit ${limit.toFixed(0)} s`);
	for (const { heading, sentences, attention } of sayCare(show, care)) {
		lines.push(`${attention ? "Care" : "Note"}, ${heading.toLowerCase()}: ${sentences.join(" ")}`);
	}
	for (const { change, cost } of care.wakeRemedies) lines.push(`  ${change} ${cost}`);
	for (const flash of flashes) lines.push(`Warning: ${flashSentence(flash)}`);
	for (const note of [...check.notes, ...notes]) lines.push(note);
	lines.push(check.flies ? "The show flies." : "The show can't be flown as it stands.");
	return lines;
}

export async function runCheck(given: Arguments, progress: Progress): Promise<Answer> {
	const [path] = given.operands;
	const { show, soundtrack } = readShowFile(path);
	const curves = await hearCurves(show, path, soundtrack, given.values.get("--soundtrack"), progress);
	const { flown, formations } = findRemedies(await flyWhole(show, curves, progress), progress);
	const formationRemedies = formations.map(({ id, remedies }) => ({ id, remedies: remedies.map(describeRemedy) }));
	return {
		code: flown.check.flies ? 0 : 2,
		json: { ...describeCheck(flown), formationRemedies },
		lines: checkLines(show, flown, formations),
	};
}
