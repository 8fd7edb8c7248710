import { strToU8, Zip, ZipDeflate, ZipPassThrough } from "fflate";
import { createSha256 } from "../maths/index.ts";
import { createByteRows } from "./byte-rows.ts";
import { type RowFile, rowFiles } from "./row-spans.ts";

/** Zip has no times before 1980; a fixed one lets equal shows give equal bytes. */
export const ZIP_TIME = "1980-01-01T00:00:00";

/** What the tables are made from. Times in seconds from the soundtrack's first sample. */
export interface PathSource {
	/** N. */
	readonly drones: number;
	readonly begins: number;
	/** End of the show's music. */
	readonly end: number;
	readonly ends: number;
	/** Fills 3·N metres, x y z of drone after drone. */
	positionsAt(seconds: number, out: Float64Array): void;
	/** Fills 3·N sRGB-encoded bytes, intensity multiplied in. */
	coloursAt(seconds: number, out: Uint8Array): void;
}

export interface PathRates {
	/** Rows a second, whole numbers. */
	readonly positions: number;
	readonly light: number;
}

/** A file of the zip. */
export interface TableFile {
	readonly name: string;
	readonly table: "positions" | "light";
	/** Seconds of its first and last row. */
	readonly from: number;
	readonly to: number;
	/** Rows, header not counted. */
	readonly rows: number;
	readonly bytes: number;
	readonly sha256: string;
}

const POSITIONS_HEADER = strToU8("drone,seconds,right_m,away_m,up_m\n");
const LIGHT_HEADER = strToU8("drone,seconds,red,green,blue\n");

/** Metres or seconds → whole millionths: what a cell of six decimals holds. */
export function micro(value: number): number {
	const whole = Math.round(value * 1e6);
	return whole === 0 ? 0 : whole;
}

/** "seconds" as every drone's rows write it. */
function timeCells(file: RowFile, rate: number): Uint8Array[] {
	const cells: Uint8Array[] = [];
	for (let row = file.first; row <= file.last; row++) {
		const time = micro(row / rate) / 1e6;
		cells.push(strToU8(`,${time.toFixed(6)},`));
	}
	return cells;
}

/**
 * Writes one table of one file: rows sorted by drone, then time.
 * @param fill puts the values of one instant at `offset` into the block
 */
function writeRows<Block extends Float64Array | Uint8Array>(
	source: PathSource,
	file: RowFile,
	rate: number,
	header: Uint8Array,
	block: Block,
	fill: (seconds: number, row: number, block: Block) => void,
	decimals: boolean,
	sink: (bytes: Uint8Array) => void,
): void {
	const rows = file.last - file.first + 1;
	const width = 3 * source.drones;
	for (let row = 0; row < rows; row++) fill((file.first + row) / rate, row, block);
	const times = timeCells(file, rate);
	const out = createByteRows(sink);
	out.text(header);
	for (let drone = 0; drone < source.drones; drone++) {
		const name = strToU8(String(drone + 1));
		for (let row = 0; row < rows; row++) {
			const at = row * width + 3 * drone;
			out.text(name);
			out.text(times[row]);
			if (decimals) {
				out.micro(block[at]);
				out.comma();
				out.micro(block[at + 1]);
				out.comma();
				out.micro(block[at + 2]);
			} else {
				out.byte(block[at]);
				out.comma();
				out.byte(block[at + 1]);
				out.comma();
				out.byte(block[at + 2]);
			}
			out.newline();
		}
	}
	out.flush();
}

/**
 * `flight-paths.zip`, written file by file so that no more than 60 s of one table is held at a time.
 * @param describe makes `flight-paths.json` once every table is written and hashed; it closes the zip
 * @returns the zip's bytes; equal sources give equal bytes
 */
export function zipFlightPaths(
	source: PathSource,
	rates: PathRates,
	describe: (tables: readonly TableFile[]) => string,
	onProgress: (share: number) => void = () => {},
): Uint8Array {
	const pieces: Uint8Array[] = [];
	let failure: Error | null = null;
	const zip = new Zip((error, piece) => {
		if (error !== null) failure = error;
		else pieces.push(piece);
	});
	const tables: TableFile[] = [];
	const plans = (["positions", "light"] as const).flatMap((table) => {
		const rate = rates[table];
		return rowFiles(source.begins, source.end, source.ends, rate).map((file) => ({ table, rate, file }));
	});
	const scratch = new Float64Array(3 * source.drones);
	const colours = new Uint8Array(3 * source.drones);
	plans.forEach(({ table, rate, file }, index) => {
		const name = `${table}-${file.suffix}.csv`;
		// Rows repeat so much that a deeper search saves 2 % of the bytes for half as much time again.
		const entry = new ZipDeflate(name, { level: 3 });
		entry.mtime = ZIP_TIME;
		zip.add(entry);
		const digest = createSha256();
		let bytes = 0;
		const sink = (piece: Uint8Array): void => {
			digest.update(piece);
			bytes += piece.length;
			entry.push(piece);
		};
		const rows = file.last - file.first + 1;
		const size = 3 * source.drones * rows;
		if (table === "positions") {
			const fill = (seconds: number, row: number, block: Float64Array): void => {
				source.positionsAt(seconds, scratch);
				for (let i = 0; i < scratch.length; i++) block[row * scratch.length + i] = micro(scratch[i]);
			};
			writeRows(source, file, rate, POSITIONS_HEADER, new Float64Array(size), fill, true, sink);
		} else {
			const fill = (seconds: number, row: number, block: Uint8Array): void => {
				source.coloursAt(seconds, colours);
				block.set(colours, row * colours.length);
			};
			writeRows(source, file, rate, LIGHT_HEADER, new Uint8Array(size), fill, false, sink);
		}
		entry.push(new Uint8Array(0), true);
		tables.push({
			name,
			table,
			from: micro(file.first / rate) / 1e6,
			to: micro(file.last / rate) / 1e6,
			rows: rows * source.drones,
			bytes,
			sha256: digest.hex(),
		});
		onProgress((index + 1) / plans.length);
	});
	const description = new ZipPassThrough("flight-paths.json");
	description.mtime = ZIP_TIME;
	zip.add(description);
	description.push(strToU8(describe(tables)), true);
	zip.end();
	if (failure !== null) throw failure;
	return join(pieces);
}

function join(pieces: readonly Uint8Array[]): Uint8Array {
	const whole = new Uint8Array(pieces.reduce((sum, piece) => sum + piece.length, 0));
	let at = 0;
	for (const piece of pieces) {
		whole.set(piece, at);
		at += piece.length;
	}
	return whole;
}
