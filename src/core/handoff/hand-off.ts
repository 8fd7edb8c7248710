import { strToU8 } from "fflate";
import { type Care, dronePositions, type ShowCheck, type ShowFlight } from "../flight/index.ts";
import { type Flash, findFlashes, type LightProgram, lightAt } from "../light/index.ts";
import { createBeatMap, endOfShow, type Show, writeShow } from "../show/index.ts";
import { CAUTIONS } from "./cautions.ts";
import { cueListCsv, cueListJson, listCues } from "./cue-list.ts";
import { flashSentence } from "./flash-sentence.ts";
import { type PathRates, type TableFile, zipFlightPaths } from "./flight-paths.ts";
import { type HandoffFile, writeManifest } from "./manifest.ts";
import { proveRate } from "./prove-rate.ts";
import { writeReport } from "./report.ts";
import { revisionCode } from "./revision.ts";
import { DEFAULT_TIMECODE, type Timecode } from "./timecode.ts";

/** A show with everything that was computed for it. */
export interface HandoffInput {
	readonly show: Show;
	readonly flight: ShowFlight;
	readonly check: ShowCheck;
	readonly care: Care;
	readonly light: LightProgram;
	/** What flashes too often; looked for where it isn't given. */
	readonly flashes?: readonly Flash[];
}

export interface HandoffOptions {
	/** Rows a second of positions and of light, whole numbers; 10 and 50 unless told. */
	readonly rate?: number;
	readonly lightRate?: number;
	/** Hand off what can't be flown too, without flight paths and light. */
	readonly draft?: boolean;
	readonly timecode?: Timecode;
	/** Sentences that belong on the report: what could not be judged, and why. */
	readonly notes?: readonly string[];
}

export interface Handoff {
	/** Empty where the show can't be flown and no draft was asked for. */
	readonly files: readonly HandoffFile[];
	readonly revision: string;
	/** True where flight paths and light stay behind. */
	readonly draft: boolean;
	/** What the flight paths hold; null where none leave. */
	readonly rates: PathRates | null;
	readonly notes: readonly string[];
}

/**
 * Show, flight and light → every file for the crew, with one revision code. The same input gives the same bytes.
 * Flight paths leave only where the whole show flies and the file itself, flown straight from row to row, was proven.
 */
export function handOff(
	input: HandoffInput,
	options: HandoffOptions = {},
	onProgress: (share: number, stage: string) => void = () => {},
): Handoff {
	const { show, flight, check, care, light } = input;
	const timecode = options.timecode ?? DEFAULT_TIMECODE;
	const revision = revisionCode(show);
	const notes = [...(options.notes ?? [])];
	const end = endOfShow(show, createBeatMap(show.grid));
	let flies = check.flies;
	let rates: PathRates | null = null;
	if (flies) {
		onProgress(0, "proving the flight paths");
		const proven = proveRate(show, flight, options.rate ?? 10, (share) =>
			onProgress(0.4 * share, "proving the flight paths"),
		);
		notes.push(...proven.notes);
		if (proven.rate === null) flies = false;
		else rates = { positions: proven.rate, light: options.lightRate ?? 50 };
	}
	if (!flies && options.draft !== true) return { files: [], revision, draft: true, rates: null, notes };

	const lines = listCues(show, check, timecode);
	const files: HandoffFile[] = [
		{ name: "cue-list.csv", bytes: strToU8(cueListCsv(lines, revision)) },
		{ name: "cue-list.json", bytes: strToU8(cueListJson(lines, show, revision, timecode)) },
		{ name: "routine.starstave.json", bytes: strToU8(writeShow(show)) },
	];
	if (rates !== null) {
		const zipped = zipPaths(input, rates, end, revision, timecode, (share) =>
			onProgress(0.4 + 0.55 * share, "writing the flight paths"),
		);
		files.push(...zipped);
	}
	onProgress(0.95, "writing the report");
	const flashes = input.flashes ?? findFlashes(light, Math.min(0, flight.begins), Math.max(end, flight.ends));
	const report = writeReport({
		show,
		check,
		care,
		flight,
		lines,
		end,
		revision,
		draft: rates === null,
		timecode,
		flashes: flashes.map(flashSentence),
		notes,
		rates,
	});
	files.push({ name: "report.html", bytes: strToU8(report) });
	files.sort((a, b) => (a.name < b.name ? -1 : 1));
	const draft = rates === null;
	const manifest = writeManifest({
		show,
		revision,
		draft,
		flies: check.flies,
		timecode,
		rates,
		files,
		cautions: CAUTIONS,
		notes,
	});
	files.push({ name: "manifest.json", bytes: strToU8(manifest) });
	onProgress(1, "done");
	return { files, revision, draft, rates, notes };
}

/** `flight-paths.zip` and the `flight-paths.json` that also lies in it. */
function zipPaths(
	{ show, flight, light }: HandoffInput,
	rates: PathRates,
	end: number,
	revision: string,
	timecode: Timecode,
	onProgress: (share: number) => void,
): HandoffFile[] {
	let described = "";
	const describe = (tables: readonly TableFile[]): string => {
		described = describePaths(show, flight, rates, end, revision, timecode, tables);
		return described;
	};
	const source = {
		drones: flight.drones,
		begins: flight.begins,
		end,
		ends: flight.ends,
		positionsAt: (seconds: number, out: Float64Array): void => dronePositions(flight, seconds, out),
		coloursAt: (seconds: number, out: Uint8Array): void => lightAt(light, seconds, out),
	};
	const zip = zipFlightPaths(source, rates, describe, onProgress);
	return [
		{ name: "flight-paths.zip", bytes: zip },
		{ name: "flight-paths.json", bytes: strToU8(described) },
	];
}

function describePaths(
	show: Show,
	flight: ShowFlight,
	rates: PathRates,
	end: number,
	revision: string,
	timecode: Timecode,
	tables: readonly TableFile[],
): string {
	const description = {
		format: "starstave-flight-paths",
		version: 1,
		title: show.title,
		revision,
		soundtrack: show.soundtrack,
		drones: flight.drones,
		rates: { positions: rates.positions, light: rates.light },
		time: {
			unit: "s",
			zero: "the soundtrack's first sample",
			timecode,
			motorsStart: flight.begins,
			musicEnds: end,
			lastDroneDown: flight.ends,
		},
		frame: {
			unit: "m",
			right: "x, to the audience's right",
			away: "y, away from the audience",
			up: "z, up",
			origin: "on the ground at the centre of the audience-side edge",
		},
		light: "sRGB-encoded, 0 to 255, intensity multiplied in",
		between: "Between rows a drone flies straight and light is linear; this interpolated file is what was proven.",
		files: tables,
	};
	return `${JSON.stringify(description, null, "\t")}\n`;
}
