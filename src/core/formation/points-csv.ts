import type { Shape } from "../show/index.ts";
import { StarstaveError } from "../units/index.ts";
import { readCssColour } from "./css-colour.ts";

/** Most points that a formation holds, as the show file says. */
const MOST_POINTS = 20_000;

export interface PointsFile {
	readonly shape: Extract<Shape, { kind: "points" }>;
	/** #rrggbb a slot, where the file has a fourth column. */
	readonly colours?: string[];
}

/**
 * Points from a CSV file (RFC 4180): x, y, z in metres and, if wanted, a colour. A first line of words is taken for a
 * heading; commas, semicolons or tabs part the columns. With semicolons or tabs, decimal commas are read.
 * @param name the file's name, for the message
 * @throws StarstaveError that names line and column of what is no number
 */
export function readPointsCsv(text: string, name: string): PointsFile {
	const lines = text.replace(/^\uFEFF/, "").split(/\r\n|\n|\r/);
	const first = lines.find((line) => line.trim() !== "") ?? "";
	const separator = first.includes(";") ? ";" : first.includes("\t") ? "\t" : ",";
	const points: [number, number, number][] = [];
	const colours: string[] = [];
	let headed = false;
	lines.forEach((line, index) => {
		if (line.trim() === "") return;
		const cells = line.split(separator).map((cell) =>
			cell
				.trim()
				.replace(/^"(.*)"$/, "$1")
				.trim(),
		);
		if (
			!headed &&
			points.length === 0 &&
			cells.length >= 3 &&
			cells.slice(0, 3).every((cell) => /^[A-Za-z]/.test(cell))
		) {
			headed = true;
			return;
		}
		if (cells.length < 3)
			throw new StarstaveError(
				"formation",
				`Line ${index + 1} of ${name} has ${cells.length} column${cells.length === 1 ? "" : "s"}, but needs three: x, y and z in metres.`,
			);
		points.push(
			[0, 1, 2].map((axis) => readMetres(cells[axis], axis, index, name, separator)) as [number, number, number],
		);
		const colour = cells[3] ?? "";
		if (colour === "") return;
		const read = readCssColour(colour);
		if (read === null)
			throw new StarstaveError(
				"formation",
				`Line ${index + 1}, column 4 (colour) of ${name} is "${colour}", but must be a colour such as #ff8000.`,
			);
		colours[points.length - 1] = read;
	});
	if (points.length === 0)
		throw new StarstaveError("formation", `${name} holds no points; each line needs x, y and z in metres.`);
	if (points.length > MOST_POINTS)
		throw new StarstaveError(
			"formation",
			`${name} holds ${points.length} points, but must hold ${MOST_POINTS} or fewer.`,
		);
	const shape = { kind: "points" as const, points };
	return colours.length === 0 ? { shape } : { shape, colours: points.map((_, i) => colours[i] ?? "#ffffff") };
}

function readMetres(cell: string, axis: number, index: number, name: string, separator: string): number {
	const text = separator === "," ? cell : cell.replace(",", ".");
	const value = Number(text);
	if (text !== "" && Number.isFinite(value)) return value;
	throw new StarstaveError(
		"formation",
		`Line ${index + 1}, column ${axis + 1} (${"xyz"[axis]}) of ${name} is "${cell}", but must be a number of metres.`,
	);
}
