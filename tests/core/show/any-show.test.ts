import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { readShow, writeShow } from "../../../src/core/show/index.ts";
import { StarstaveError } from "../../../src/core/units/index.ts";
import { sampleFile } from "./sample-show.ts";

type Node = Record<string | number, unknown>;

/** Every place of the sample, as paths of keys. */
function placesOf(root: unknown, path: readonly (string | number)[] = []): (string | number)[][] {
	if (root === null || typeof root !== "object") return [];
	return Object.keys(root).flatMap((key) => {
		const next = [...path, Array.isArray(root) ? Number(key) : key];
		return [next, ...placesOf((root as Node)[key], next)];
	});
}

const places = placesOf(sampleFile());

/** What may stand where something else is expected. */
const anything = fc.oneof(
	fc.constantFrom(null, true, "", "f1", "c2", "#12345g", -1, 0, 0.5, 12, 1e9, -1e9),
	fc.jsonValue({ maxDepth: 2 }),
);

describe("any file that was a show", () => {
	it("is read and comes back the same, or is refused with one sentence, whatever was put in the place of any value", () => {
		const outcomes = { taken: 0, refused: 0 };
		fc.assert(
			fc.property(fc.constantFrom(...places), anything, fc.boolean(), (place, value, remove) => {
				const file = sampleFile();
				let node = file as unknown as Node;
				for (const key of place.slice(0, -1)) node = node[key] as Node;
				const last = place[place.length - 1];
				if (remove) delete node[last];
				else node[last] = value;
				let text: string;
				try {
					const show = readShow(JSON.stringify(file));
					outcomes.taken++;
					text = writeShow(show);
					expect(readShow(text)).toEqual(show);
				} catch (error) {
					if (!(error instanceof StarstaveError)) throw error;
					outcomes.refused++;
					expect(error.message).toMatch(/^\P{Ll}[^\n]*\.$/u);
					return;
				}
				expect(writeShow(readShow(text))).toBe(text);
			}),
			{ numRuns: 600 },
		);
		expect(outcomes.taken).toBeGreaterThan(10);
		expect(outcomes.refused).toBeGreaterThan(50);
	});

	it("is refused with one sentence wherever it is cut off", () => {
		const text = JSON.stringify(sampleFile());
		for (let length = 0; length < text.length; length += 7) {
			expect(() => readShow(text.slice(0, length))).toThrow(StarstaveError);
		}
	});
});
