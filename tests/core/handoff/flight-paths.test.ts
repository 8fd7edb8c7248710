import { createHash } from "node:crypto";
import { strFromU8, unzipSync } from "fflate";
import Papa from "papaparse";
import { describe, expect, it } from "vitest";
import { type PathSource, type TableFile, zipFlightPaths } from "../../../src/core/handoff/flight-paths.ts";
import { rowFiles } from "../../../src/core/handoff/row-spans.ts";

const source: PathSource = {
	drones: 3,
	begins: -61.23,
	end: 121.05,
	ends: 190.01,
	positionsAt(seconds, out) {
		for (let i = 0; i < 3; i++) {
			out[3 * i] = Math.sin(seconds) * (i - 1) * 1e-6 - i;
			out[3 * i + 1] = seconds / 3;
			out[3 * i + 2] = 1234.5678912 + i;
		}
	},
	coloursAt(seconds, out) {
		for (let i = 0; i < 9; i++) out[i] = (Math.floor(Math.abs(seconds) * 10) + i * 100) % 256;
	},
};

function write(rates = { positions: 10, light: 25 }) {
	let tables: readonly TableFile[] = [];
	const bytes = zipFlightPaths(source, rates, (written) => {
		tables = written;
		return "{}";
	});
	return { bytes, tables, files: unzipSync(bytes) };
}

describe("rows and files", () => {
	it("cut launch, show and landing into files of 60 s with every multiple of 1/rate once", () => {
		const files = rowFiles(-61.23, 121.05, 190.01, 10);
		expect(files.map(({ suffix, first, last }) => [suffix, first, last])).toEqual([
			["launch-0000", -613, -14],
			["launch-0060", -13, -1],
			["0000", 0, 599],
			["0060", 600, 1199],
			["0120", 1200, 1210],
			["landing-0000", 1211, 1810],
			["landing-0060", 1811, 1901],
		]);
	});

	it("need neither launch nor landing", () => {
		expect(rowFiles(0, 0.3, 0.3, 10)).toEqual([{ suffix: "0000", first: 0, last: 3 }]);
	});
});

describe("the zip of flight paths", () => {
	const { bytes, tables, files } = write();

	it("holds positions and light over the same time, and says so with hashes", () => {
		const names = Object.keys(files).filter((name) => name.endsWith(".csv"));
		expect(names).toEqual(tables.map(({ name }) => name));
		expect(names.filter((name) => name.startsWith("light")).map((name) => name.replace("light", "positions"))).toEqual(
			names.filter((name) => name.startsWith("positions")),
		);
		for (const { name, sha256, bytes: size, rows } of tables) {
			expect(createHash("sha256").update(files[name]).digest("hex")).toBe(sha256);
			expect(files[name].length).toBe(size);
			expect(strFromU8(files[name]).trimEnd().split("\n").length).toBe(rows + 1);
		}
	});

	it("writes each value with six decimals, sorted by drone then time, a row for every drone at every time", () => {
		const text = strFromU8(files["positions-launch-0060.csv"]);
		expect(text.startsWith("drone,seconds,right_m,away_m,up_m\n1,-1.300000,")).toBe(true);
		const { data, errors } = Papa.parse<string[]>(text.trimEnd(), { newline: "\n" });
		expect(errors).toEqual([]);
		const rows = data.slice(1);
		expect(rows.length).toBe(3 * 13);
		const expected = new Float64Array(9);
		rows.forEach((row, at) => {
			const drone = Math.floor(at / 13);
			const seconds = (-13 + (at % 13)) / 10;
			source.positionsAt(seconds, expected);
			expect(row[0]).toBe(String(drone + 1));
			for (const cell of row.slice(1)) expect(cell).toMatch(/^-?\d+\.\d{6}$/);
			expect(Number(row[1])).toBe(seconds);
			for (let axis = 0; axis < 3; axis++) {
				expect(Math.abs(Number(row[2 + axis]) - expected[3 * drone + axis])).toBeLessThan(5.1e-7);
			}
		});
		expect(text).not.toContain("-0.000000");
	});

	it("writes light as whole numbers from 0 to 255", () => {
		const rows = strFromU8(files["light-0120.csv"]).trimEnd().split("\n");
		expect(rows[0]).toBe("drone,seconds,red,green,blue");
		const expected = new Uint8Array(9);
		source.coloursAt(120.04, expected);
		expect(rows[2]).toBe(`1,120.040000,${expected.slice(0, 3).join(",")}`);
		for (const row of rows.slice(1)) expect(row).toMatch(/^[123],\d+\.\d{6},\d{1,3},\d{1,3},\d{1,3}$/);
	});

	it("gives the same bytes every time", () => {
		expect(write().bytes).toEqual(bytes);
	});
});
