import { strToU8, unzipSync, zipSync } from "fflate";
import { describe, expect, it } from "vitest";
import { packShow, readShow, unpackShow } from "../../../src/core/show/index.ts";
import { sampleText } from "./sample-show.ts";

const show = readShow(sampleText());
const audio = Uint8Array.from({ length: 5000 }, (_, i) => (i * 37) & 255);
const packed = packShow({ show, soundtrack: { name: "harbour.wav", bytes: audio } });

describe("a show packed with its soundtrack", () => {
	it("comes back whole", () => {
		const back = unpackShow(packed);
		expect(back.show).toEqual(show);
		expect(back.soundtrack?.name).toBe("harbour.wav");
		expect(back.soundtrack?.bytes).toEqual(audio);
		expect(Object.keys(unzipSync(packed)).sort()).toEqual(["harbour.wav", "routine.json"]);
	});

	it("gives the same bytes at any time of day, and no soundtrack where there is none", () => {
		expect(packShow({ show, soundtrack: { name: "harbour.wav", bytes: audio } })).toEqual(packed);
		expect(unpackShow(packShow({ show, soundtrack: null })).soundtrack).toBeNull();
	});

	it("uses nothing but the base name of an entry", () => {
		const evil = zipSync({ "../../routine.json": strToU8(sampleText()), "/etc/harbour.wav": audio });
		expect(unpackShow(evil).soundtrack?.name).toBe("harbour.wav");
	});

	it("looks at counts and sizes before it unpacks", () => {
		const many = zipSync(Object.fromEntries(Array.from({ length: 20 }, (_, i) => [`${i}.txt`, strToU8("x")])));
		expect(() => unpackShow(many)).toThrow("The show's zip holds more than 16 files; a show has two.");
		// A directory that claims 4 GB for one entry: bytes 24–27 of its record.
		const large = packed.slice();
		const view = new DataView(large.buffer);
		for (let at = 0; at + 4 < large.length; at++) {
			if (view.getUint32(at, true) === 0x02014b50) view.setUint32(at + 24, 0xfffffff0, true);
		}
		expect(() => unpackShow(large)).toThrow(/takes 4294967280 bytes; at most/);
	});

	it("does not grow past what the directory says, whatever the data would unpack to", () => {
		const bomb = zipSync({ "routine.json": new Uint8Array(50_000_000) });
		const view = new DataView(bomb.buffer);
		for (let at = 0; at + 4 < bomb.length; at++) {
			if (view.getUint32(at, true) === 0x02014b50) view.setUint32(at + 24, 1000, true);
		}
		expect(() => unpackShow(bomb)).toThrow(/show|zip/);
	});

	it("says what is wrong with what is no show", () => {
		expect(() => unpackShow(strToU8("not a zip"))).toThrow(
			"The file is no whole zip; open a file that was saved as a show.",
		);
		expect(() => unpackShow(packed.subarray(0, packed.length - 30))).toThrow(/no whole zip/);
		expect(() => unpackShow(zipSync({ "a.txt": strToU8("x") }))).toThrow("The zip holds no routine.json");
	});
});
