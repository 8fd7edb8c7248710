import type { Shape } from "../show/index.ts";
import { StarstaveError } from "../units/index.ts";
import { extentOf, FLATNESS, type Ink, moveContours, readContours, spreadInk } from "./ink.ts";
import type { Measure } from "./measure.ts";
import type { Spread } from "./spread-shape.ts";
import { CAPITAL_HEIGHT, GLYPHS, KERNING } from "./typeface-data.ts";

/**
 * Text set in the typeface that ships with the tool. Lengths are in heights of a capital letter until the end. Each
 * letter is a group "letter 1", "letter 2" … (spaces aren't counted), each word a group "word 1" …
 */

/** From baseline to baseline, in heights of a capital letter: accents and descenders stay clear of each other. */
const LINE_HEIGHT = 1.9;

/** Metres of the shape's height are those of a capital letter. */
export function spreadText(shape: Extract<Shape, { kind: "text" }>, measure: Measure): Spread {
	const inks = setText(shape.text);
	if (inks.length === 0)
		throw new StarstaveError("formation", "The text has nothing but spaces, so it gives no slots; it needs a letter.");
	return spreadInk(inks, shape.count, shape.style, shape.height, measure);
}

/** The letters of a text where they stand, lines centred under each other. */
export function setText(text: string): Ink[] {
	const scale = 1 / CAPITAL_HEIGHT;
	const kerning = readKerning();
	const inks: Ink[] = [];
	let [letters, words] = [0, 0];
	text.split(/\r?\n/).forEach((line, row) => {
		const set: Ink[] = [];
		let pen = 0;
		let before = "";
		let inWord = false;
		for (const letter of line.normalize("NFC")) {
			const glyph = GLYPHS[letter === "\t" ? " " : letter];
			if (glyph === undefined)
				throw new StarstaveError(
					"formation",
					`The typeface has no letter for "${letter}"; it holds Latin letters, digits and punctuation.`,
				);
			pen += (kerning.get(before + letter) ?? 0) * scale;
			if (glyph[1] !== "") {
				if (!inWord) words++;
				letters++;
				const contours = moveContours(readContours(glyph[1], scale, FLATNESS), pen, -row * LINE_HEIGHT);
				set.push({ contours, groups: [`letter ${letters}`, `word ${words}`] });
			}
			inWord = glyph[1] !== "";
			pen += glyph[0] * scale;
			before = letter;
		}
		const extent = extentOf(set.flatMap((ink) => ink.contours));
		const middle = extent === null ? 0 : (extent[0] + extent[2]) / 2;
		for (const ink of set) inks.push({ ...ink, contours: moveContours(ink.contours, -middle, 0) });
	});
	return inks;
}

function readKerning(): Map<string, number> {
	const pairs = new Map<string, number>();
	for (const [value, letters] of KERNING)
		for (let i = 0; i < letters.length; i += 2) pairs.set(letters.slice(i, i + 2), value);
	return pairs;
}
