import type { ShowFlight } from "../flight/index.ts";
import type { CueLine } from "./cue-list.ts";
import { type Html, html, table } from "./html.ts";
import { type Timecode, timecodeAt } from "./timecode.ts";

/** Seconds of warning before a called cue, for whoever calls it (common practice, no source). */
export const STANDBY_SECONDS = 10;

/** One line of the run sheet: a cue, the standby before a called one, or what the tool itself flies. */
interface RunLine {
	readonly time: number;
	/** Among lines of one time: what happens first stands first. */
	readonly rank: number;
	readonly what: "cue" | "standby" | "fleet";
	readonly number: string;
	readonly words: string;
	readonly place: string;
	readonly note: string;
}

function runLines(lines: readonly CueLine[], flight: ShowFlight | null, end: number): RunLine[] {
	const run: RunLine[] = [];
	const fleet = (time: number, words: string): void => {
		run.push({ time, rank: 1, what: "fleet", number: "", words, place: "", note: "" });
	};
	if (flight !== null) {
		// Launch and landing may each take several legs: up, then across.
		const launch = flight.legs.filter((leg) => leg.id.startsWith("launch")).at(-1);
		const landing = flight.legs.find((leg) => leg.id.startsWith("landing"));
		if (launch !== undefined) {
			fleet(flight.begins, "Motors start, launch begins");
			fleet(launch.arrives, "Fleet stands in the opening, dark");
		}
		if (landing !== undefined) {
			fleet(landing.departs, "Landing begins");
			fleet(flight.ends, "Last drone is down");
		}
	}
	fleet(0, "Music starts");
	fleet(end, "Music ends");
	for (const line of lines) {
		const name = line.name === "" ? "" : `${line.name}: `;
		const arrives = line.kind === "transition" ? `, arrives ${line.endTimecode}` : "";
		const group = line.group === "all" ? "" : ` (${line.group})`;
		run.push({
			time: line.start,
			rank: 2,
			what: "cue",
			number: line.called ? `${line.number} CALLED` : line.number,
			words: `${name}${line.kind} ${line.values}${group}${arrives}`,
			place: `${line.section}${line.section === "" ? "" : " · "}bar ${line.bar}, beat ${line.beat}`,
			note: line.note,
		});
		if (line.called) {
			const time = line.start - STANDBY_SECONDS;
			run.push({ time, rank: 0, what: "standby", number: line.number, words: "Standby", place: "", note: "" });
		}
	}
	return run.sort((a, b) => a.time - b.time || a.rank - b.rank);
}

/** The cue list laid out for people on paper, with launch, music and landing in their places. */
export function runSheet(lines: readonly CueLine[], flight: ShowFlight | null, end: number, timecode: Timecode): Html {
	const rows = runLines(lines, flight, end).map((line) => [
		timecodeAt(line.time, timecode),
		line.time.toFixed(2),
		line.what === "cue" ? html`<b>${line.number}</b>` : line.number,
		line.what === "cue" ? line.words : html`<i>${line.words}</i>`,
		line.place,
		line.note,
	]);
	return table(["Timecode", "Seconds", "Cue", "What happens", "Where", "Note"], rows);
}
