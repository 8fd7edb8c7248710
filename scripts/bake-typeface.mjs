// Bakes the outlines that text formations are drawn from into src/core/formation/typeface-data.ts, so that page, worker
// and command line spell a word with the same slots, without reading a font at run time. Run after the font changes:
//   node scripts/bake-typeface.mjs
import { readFileSync, writeFileSync } from "node:fs";
import opentype from "opentype.js";

const FONT = new URL("../node_modules/@fontsource/atkinson-hyperlegible/", import.meta.url);
const OUT = new URL("../src/core/formation/typeface-data.ts", import.meta.url);
const LICENCE = new URL("../public/licences/atkinson-hyperlegible.txt", import.meta.url);

/** Basic Latin, Latin-1, Latin Extended-A, and the punctuation that titles are set with. */
const RANGES = [
	[0x20, 0x7e],
	[0xa0, 0xff],
	[0x100, 0x17f],
	[0x2013, 0x2014],
	[0x2018, 0x201e],
	[0x2022, 0x2022],
	[0x2026, 0x2026],
	[0x20ac, 0x20ac],
];

function load(set) {
	const bytes = readFileSync(new URL(`files/atkinson-hyperlegible-${set}-700-normal.woff`, FONT));
	return opentype.parse(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength));
}

/** Path data in font units, y down, relative after each moveto; every contour ends in z, which also draws its last line. */
function pathData(glyph, unitsPerEm) {
	let d = "";
	let [x, y] = [0, 0];
	const number = (value) => `${d.endsWith(",") || /[a-zA-Z]$/.test(d) || value < 0 ? "" : " "}${value}`;
	const add = (letter, ...values) => {
		d += letter;
		for (const value of values) d += number(value);
	};
	for (const command of glyph.getPath(0, 0, unitsPerEm).commands) {
		const [cx, cy] = [Math.round(command.x ?? 0), Math.round(command.y ?? 0)];
		if (command.type === "Z") continue;
		if (command.type === "M") {
			if (d !== "") d += "z";
			add("M", cx, cy);
		} else if (command.type === "L") {
			if (cx !== x || cy !== y) add("l", cx - x, cy - y);
		} else if (command.type === "Q") add("q", Math.round(command.x1) - x, Math.round(command.y1) - y, cx - x, cy - y);
		else if (command.type === "C")
			add(
				"c",
				Math.round(command.x1) - x,
				Math.round(command.y1) - y,
				Math.round(command.x2) - x,
				Math.round(command.y2) - y,
				cx - x,
				cy - y,
			);
		[x, y] = [cx, cy];
	}
	return d === "" ? d : `${d}z`;
}

const fonts = [load("latin"), load("latin-ext")];
const glyphs = {};
const known = [];
for (const [from, to] of RANGES)
	for (let code = from; code <= to; code++) {
		const letter = String.fromCodePoint(code);
		const font = fonts.find((candidate) => candidate.charToGlyphIndex(letter) > 0);
		if (font === undefined) continue;
		const glyph = font.charToGlyph(letter);
		glyphs[letter] = [Math.round(glyph.advanceWidth), pathData(glyph, font.unitsPerEm)];
		if (font === fonts[0] && code < 0x100) known.push(letter);
	}
// Pairs of letters, "AV" → −89 units; grouped by the value, since few values serve many pairs.
const pairs = new Map();
for (const left of known)
	for (const right of known) {
		const value = Math.round(fonts[0].getKerningValue(fonts[0].charToGlyph(left), fonts[0].charToGlyph(right)));
		// Less than a hundredth of an em is less than a drone's own width on any picture that can be flown.
		if (Math.abs(value) >= 10) pairs.set(value, (pairs.get(value) ?? "") + left + right);
	}

const rows = Object.entries(glyphs).map(([letter, entry]) => `\t${JSON.stringify(letter)}: ${JSON.stringify(entry)},`);
const kerning = [...pairs].sort(([a], [b]) => a - b).map(([value, text]) => `\t[${value}, ${JSON.stringify(text)}],`);
writeFileSync(
	OUT,
	`/**
 * Outlines of Atkinson Hyperlegible Bold, baked by scripts/bake-typeface.mjs: do not edit.
 * Copyright 2020 Braille Institute of America, Inc., SIL Open Font License 1.1
 * (public/licences/atkinson-hyperlegible.txt).
 */

/** Units in an em, and height of a capital letter in them. */
export const UNITS_PER_EM = ${fonts[0].unitsPerEm};
export const CAPITAL_HEIGHT = ${fonts[0].tables.os2.sCapHeight};

/** Letter → advance in units, path data in units with y down from the baseline. */
export const GLYPHS: Readonly<Record<string, readonly [number, string]>> = {
${rows.join("\n")}
};

/** Units to add between two letters, and all pairs of letters that it holds for, one pair after the other. */
export const KERNING: readonly (readonly [number, string])[] = [
${kerning.join("\n")}
];
`,
);
writeFileSync(LICENCE, readFileSync(new URL("LICENSE", FONT)));
process.stdout.write(`${rows.length} letters, ${kerning.length} kerning values\n`);
