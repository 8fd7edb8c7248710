import type { Shape } from "../show/index.ts";
import { StarstaveError } from "../units/index.ts";
import { readCssColour } from "./css-colour.ts";
import { flattenSegments } from "./flatten.ts";
import { parsePathData } from "./path-data.ts";
import { combine, IDENTITY, readTransform, type Transform, transformSegments, writePathData } from "./transform.ts";
import { readXml, type XmlElement } from "./xml.ts";

/**
 * SVG files as drawings (SVG 2): path, line, polyline, polygon, rect, circle and ellipse, in groups with transforms.
 * Each becomes a path with its stroke's colour, or its fill's where it has no stroke, and its id or label as name.
 * Text, images, clips, masks, style sheets and anything outside the file are left out.
 */
export type Drawing = Extract<Shape, { kind: "drawing" }>;

/** Slots and metres a new drawing starts with, before the designer sizes it. */
const DEFAULT_COUNT = 100;
const DEFAULT_HEIGHT = 30;

/** Elements whose content is not drawn where it stands. */
const NOT_DRAWN = new Set([
	"defs",
	"clipPath",
	"mask",
	"symbol",
	"marker",
	"pattern",
	"metadata",
	"style",
	"title",
	"desc",
]);

/** What an element inherits from those about it. */
interface Style {
	readonly stroke: string | null;
	readonly fill: string | null;
	readonly name: string | null;
}

/**
 * @param text the file
 * @param name its name, for the message
 * @throws StarstaveError for what is no SVG file and for one that draws nothing
 */
export function readSvg(text: string, name: string, options: { count?: number; height?: number } = {}): Drawing {
	const root = readXml(text, name);
	if (root.name !== "svg")
		throw new StarstaveError("formation", `${name} is not an SVG file: its root is <${root.name}>, but must be <svg>.`);
	const paths: Drawing["paths"] = [];
	readElement(root, IDENTITY, { stroke: null, fill: null, name: null }, name, paths);
	if (paths.length === 0)
		throw new StarstaveError(
			"formation",
			`${name} holds no path, line or outline to draw; in the drawing program, turn text and images into paths first.`,
		);
	return {
		kind: "drawing",
		paths,
		height: options.height ?? DEFAULT_HEIGHT,
		count: options.count ?? DEFAULT_COUNT,
		style: "outline",
	};
}

function readElement(
	element: XmlElement,
	outer: Transform,
	inherited: Style,
	file: string,
	paths: Drawing["paths"],
): void {
	if (NOT_DRAWN.has(element.name)) return;
	const declared = readDeclarations(element);
	if (declared("display") === "none" || declared("visibility") === "hidden") return;
	const own = element.attributes.get("transform");
	const transform = own === undefined ? outer : combine(outer, readTransform(own));
	const label = element.attributes.get("inkscape:label") ?? element.attributes.get("id") ?? null;
	const style: Style = {
		stroke: declared("stroke") ?? inherited.stroke,
		fill: declared("fill") ?? inherited.fill,
		// The root's id names the file, not a part of the picture.
		name: element.name === "svg" ? inherited.name : (label ?? inherited.name),
	};
	const d = pathOf(element);
	if (d !== null) {
		let segments: ReturnType<typeof parsePathData>;
		try {
			segments = parsePathData(d);
		} catch (cause) {
			if (!(cause instanceof StarstaveError)) throw cause;
			const which = label === null ? `A <${element.name}>` : `<${element.name}> "${label}"`;
			throw new StarstaveError("formation", `${which} of ${file} can't be read. ${cause.message}`, { cause });
		}
		const plain = transform.every((value, i) => value === IDENTITY[i]);
		const moved = plain ? segments : transformSegments(segments, transform);
		if (flattenSegments(moved, 1).length > 0) {
			const colour = colourOf(style);
			paths.push({
				d: writePathData(moved),
				...(colour === undefined ? {} : { colour }),
				...(style.name === null ? {} : { name: style.name }),
			});
		}
	}
	for (const child of element.children) readElement(child, transform, style, file, paths);
}

/** Presentation attributes, with what stands in `style` over them; "inherit" is what nothing says too. */
function readDeclarations(element: XmlElement): (property: string) => string | null {
	const inline = new Map<string, string>();
	for (const part of (element.attributes.get("style") ?? "").split(";")) {
		const colon = part.indexOf(":");
		if (colon > 0) inline.set(part.slice(0, colon).trim(), part.slice(colon + 1).trim());
	}
	return (property) => {
		const value = (inline.get(property) ?? element.attributes.get(property))?.trim();
		return value === undefined || value === "" || value === "inherit" ? null : value;
	};
}

/**
 * The stroke's colour, else the fill's. Black is ink on paper, and drones can't show it: it is no colour of its own, as
 * is what can't be told (gradients, currentColor).
 */
function colourOf(style: Style): string | undefined {
	for (const value of [style.stroke, style.fill]) {
		if (value === null || value === "none") continue;
		const colour = readCssColour(value);
		if (colour !== null && colour !== "#000000") return colour;
	}
	return undefined;
}

/** Path data of a basic shape as SVG 2, chapter 10, draws it; null for what draws nothing itself. */
function pathOf(element: XmlElement): string | null {
	const number = (key: string): number => {
		const value = Number.parseFloat(element.attributes.get(key) ?? "0");
		return Number.isFinite(value) ? value : 0;
	};
	switch (element.name) {
		case "path":
			return element.attributes.get("d") ?? null;
		case "line":
			return `M${number("x1")} ${number("y1")}L${number("x2")} ${number("y2")}`;
		case "polyline":
		case "polygon": {
			const points = (element.attributes.get("points") ?? "").trim();
			if (points === "") return null;
			return `M${points}${element.name === "polygon" ? "Z" : ""}`;
		}
		case "circle":
			return ellipsePath(number("cx"), number("cy"), number("r"), number("r"));
		case "ellipse": {
			const [rx, ry] = [element.attributes.get("rx"), element.attributes.get("ry")];
			const across = number(rx === undefined || rx === "auto" ? "ry" : "rx");
			return ellipsePath(number("cx"), number("cy"), across, ry === undefined || ry === "auto" ? across : number("ry"));
		}
		case "rect":
			return rectPath(element, number);
		default:
			return null;
	}
}

function ellipsePath(cx: number, cy: number, rx: number, ry: number): string | null {
	if (rx <= 0 || ry <= 0) return null;
	const half = (x: number): string => `A${rx} ${ry} 0 0 1 ${x} ${cy}`;
	return `M${cx + rx} ${cy}${half(cx - rx)}${half(cx + rx)}Z`;
}

function rectPath(element: XmlElement, number: (key: string) => number): string | null {
	const [x, y, width, height] = [number("x"), number("y"), number("width"), number("height")];
	if (width <= 0 || height <= 0) return null;
	const given = (key: string): boolean => element.attributes.has(key) && element.attributes.get(key) !== "auto";
	const rx = Math.min(width / 2, given("rx") ? number("rx") : given("ry") ? number("ry") : 0);
	const ry = Math.min(height / 2, given("ry") ? number("ry") : given("rx") ? number("rx") : 0);
	if (rx <= 0 || ry <= 0) return `M${x} ${y}h${width}v${height}h${-width}Z`;
	const corner = (dx: number, dy: number): string => `a${rx} ${ry} 0 0 1 ${dx} ${dy}`;
	const [across, down] = [width - 2 * rx, height - 2 * ry];
	return `M${x + rx} ${y}h${across}${corner(rx, ry)}v${down}${corner(-rx, ry)}h${-across}${corner(-rx, -ry)}v${-down}${corner(rx, -ry)}Z`;
}
