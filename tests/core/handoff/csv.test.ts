import fc from "fast-check";
import Papa from "papaparse";
import { describe, expect, it } from "vitest";
import { writeCell, writeCsv } from "../../../src/core/handoff/csv.ts";

describe("comma-separated values", () => {
	// RFC 4180 as papaparse reads it.
	it("bring back any text through a parser of RFC 4180", () => {
		const cell = fc.string({ unit: fc.constantFrom("a", "é", "🎆", '"', ",", "\n", "\r", " ", "7", ";", "'") });
		const safe = cell.filter((text) => !/^[=+\-@\t\r\n]/.test(text));
		fc.assert(
			fc.property(fc.array(fc.tuple(safe, safe, safe), { minLength: 1, maxLength: 6 }), (rows) => {
				const text = writeCsv(["one", "two", "three"], rows);
				const read = Papa.parse<string[]>(text, { newline: "\n", delimiter: "," });
				expect(read.errors).toEqual([]);
				expect(read.data.slice(1, -1)).toEqual(rows);
			}),
		);
	});

	it("keep what a spreadsheet would run from running, and leave numbers alone", () => {
		for (const evil of ["=1+1", "+A1", "-2+3", "@SUM(A1)", "\t=1", "\r=1", '=HYPERLINK("http://x","y")']) {
			const [[held]] = Papa.parse<string[]>(writeCell(evil), { delimiter: ",", newline: "\n" }).data;
			expect(held.startsWith("'")).toBe(true);
			expect(held.slice(1)).toBe(evil);
		}
		expect(writeCell(-4.25)).toBe("-4.25");
		expect(writeCell(null)).toBe("");
		expect(writeCell(true)).toBe("yes");
	});

	it("end every line with a line feed", () => {
		expect(writeCsv(["a", "b"], [[1, "x,y"]])).toBe('a,b\n1,"x,y"\n');
	});
});
