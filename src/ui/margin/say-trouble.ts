import type { TransitionCheck, Verdict } from "../../core/flight/index.ts";
import type { Show } from "../../core/show/index.ts";
import { sayBeats, saySeconds, sayTime } from "../say-place.ts";

/** Sentences: time first, then space, each with its figure and its limit. */
export function sayWhy(check: TransitionCheck, show: Show): string {
	const { needed, available, slackBeats, gap, breach, verdicts } = check;
	const { spacing } = show.fleet.limits;
	const parts: string[] = [];
	if (needed !== null) {
		const spare = available - needed;
		const beats = slackBeats === null ? "" : `, ${sayBeats(Math.abs(slackBeats))}`;
		parts.push(
			`It has ${saySeconds(available)} and needs ${saySeconds(needed)}: ${saySeconds(Math.abs(spare))}${beats} ${spare < 0 ? "short" : "in hand"}.`,
		);
	} else {
		parts.push(`It has ${saySeconds(available)}, but no duration makes it fly.`);
	}
	if (breach !== null) parts.push(sayBreach(breach, show));
	if (gap !== null) {
		const pair = `Drones ${gap.drones[0] + 1} and ${gap.drones[1] + 1} come to ${gap.distance.toFixed(2)} m of each other at ${sayTime(gap.time)}`;
		parts.push(
			verdicts.includes("too-close") ? `${pair}; spacing is ${spacing} m.` : `${pair}, with a spacing of ${spacing} m.`,
		);
	}
	return parts.join(" ");
}

export function sayBreach({ drone, time, blocked }: NonNullable<TransitionCheck["breach"]>, show: Show): string {
	const where = blocked === null ? "leaves the flight volume" : `enters blocked volume ${blocked + 1}`;
	const box = blocked === null ? show.venue.volume : show.venue.blocked[blocked];
	const span = [0, 1, 2].map((axis) => `${box?.min[axis]} to ${box?.max[axis]}`);
	return `Drone ${drone + 1} ${where} at ${sayTime(time)} (${span[0]} m across, ${span[1]} m away, ${span[2]} m up).`;
}

/** Why a fleet can't stand there, as a sentence. */
export function sayFormationTrouble(
	{ gap, verdicts }: { readonly gap: number; readonly verdicts: readonly Verdict[] },
	show: Show,
): string {
	const parts = [
		verdicts.includes("too-close")
			? `its closest slots are ${gap.toFixed(2)} m apart, and spacing is ${show.fleet.limits.spacing} m`
			: "",
		verdicts.includes("out-of-venue") ? "it reaches out of the flight volume or into what is blocked" : "",
	];
	return `${parts.filter((part) => part !== "").join("; ")}.`;
}
