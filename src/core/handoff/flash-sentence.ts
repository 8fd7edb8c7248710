import type { Flash } from "../light/index.ts";

/** A warning of flashes as a sentence for people; drones count from 1. */
export function flashSentence({ kind, from, to, most, drones, drone }: Flash): string {
	const who = drones === 1 ? `drone ${drone + 1} shows` : `${drones} drones, such as drone ${drone + 1}, show`;
	const what = kind === "red" ? "red flashes" : "flashes";
	return `From ${from.toFixed(2)} to ${to.toFixed(2)} s ${who} up to ${most} ${what} in one second, more than the three of WCAG 2.3.1.`;
}
