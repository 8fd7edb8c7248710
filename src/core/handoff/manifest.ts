import { sha256Hex } from "../maths/index.ts";
import type { Show } from "../show/index.ts";
import type { PathRates } from "./flight-paths.ts";
import type { Timecode } from "./timecode.ts";

/** A file that leaves for the crew. */
export interface HandoffFile {
	readonly name: string;
	readonly bytes: Uint8Array;
}

export interface ListedFile {
	readonly name: string;
	readonly bytes: number;
	readonly sha256: string;
}

export function listFile({ name, bytes }: HandoffFile): ListedFile {
	return { name, bytes: bytes.length, sha256: sha256Hex(bytes) };
}

export interface ManifestInput {
	readonly show: Show;
	readonly revision: string;
	readonly draft: boolean;
	readonly flies: boolean;
	readonly timecode: Timecode;
	/** Null where no flight paths leave. */
	readonly rates: PathRates | null;
	readonly files: readonly HandoffFile[];
	readonly cautions: readonly string[];
	readonly notes: readonly string[];
}

/** `manifest.json`: every other file with its hash, and what they were made from. */
export function writeManifest(input: ManifestInput): string {
	const { show } = input;
	const manifest = {
		format: "starstave-handoff",
		version: 1,
		title: show.title,
		revision: input.revision,
		draft: input.draft,
		flies: input.flies,
		drones: show.fleet.count,
		soundtrack: show.soundtrack,
		timecode: input.timecode,
		rates: input.rates,
		files: input.files.map(listFile),
		cautions: input.cautions,
		notes: input.notes,
	};
	return `${JSON.stringify(manifest, null, "\t")}\n`;
}
