import { settleShape } from "../../core/formation/index.ts";
import type { Fleet, NewFormation, Shape, Venue } from "../../core/show/index.ts";

type Kind = Shape["kind"];

export const SHAPE_KINDS: readonly { readonly value: Kind; readonly name: string }[] = [
	{ value: "text", name: "text" },
	{ value: "ring", name: "ring" },
	{ value: "disc", name: "disc" },
	{ value: "sphere", name: "sphere" },
	{ value: "helix", name: "helix" },
	{ value: "wave", name: "wave" },
	{ value: "grid", name: "grid" },
	{ value: "line", name: "line" },
];

/** A new formation of a kind, for the whole fleet where the kind allows, spread to a comfortable spacing. */
export function freshShape(kind: Kind, { count: drones, limits }: Fleet, venue: Venue): NewFormation {
	const count = Math.max(1, drones);
	const side = Math.max(1, Math.floor(Math.sqrt(count)));
	const raw = ((): Shape => {
		switch (kind) {
			case "text":
				return { kind, text: "HELLO", height: 12, count, style: "outline" };
			case "helix":
				return { kind, count, radius: 10, height: 30, turns: 3 };
			case "grid":
				return {
					kind,
					columns: side,
					rows: Math.max(1, Math.floor(count / side)),
					layers: 1,
					pitch: limits.spacing * 1.5,
				};
			case "wave":
				return {
					kind,
					columns: side,
					rows: Math.max(1, Math.floor(count / side)),
					pitch: limits.spacing * 1.5,
					rise: 3,
					wavelength: 24,
				};
			case "line":
				return { kind, count, length: limits.spacing * 1.3 * (count - 1) };
			case "ring":
			case "disc":
			case "sphere":
				return { kind, count, radius: 15 };
			case "points":
				return { kind, points: [[0, 0, 0]] };
			case "drawing":
				return { kind, paths: [{ d: "M0 0H10" }], height: 10, count, style: "outline" };
		}
	})();
	const name = kind === "text" ? "HELLO" : kind;
	const { shape, place } = settleShape(raw, limits, venue, name);
	return { name, shape, place };
}

const LABELS: Record<string, string> = {
	count: "slots",
	columns: "columns",
	rows: "rows",
	layers: "layers",
	pitch: "pitch, m",
	length: "length, m",
	radius: "radius, m",
	height: "height, m",
	turns: "turns",
	rise: "rise, m",
	wavelength: "from crest to crest, m",
};

/** The numbers of a shape, in the order of the file. */
export function shapeNumbers(
	shape: Shape,
): { readonly key: string; readonly label: string; readonly value: number; readonly step: number }[] {
	const whole = new Set(["count", "columns", "rows", "layers"]);
	return Object.entries(shape).flatMap(([key, value]) =>
		typeof value === "number" && LABELS[key]
			? [{ key, label: LABELS[key], value, step: whole.has(key) ? 1 : 0.5 }]
			: [],
	);
}
