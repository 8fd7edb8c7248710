import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { compareNumbers, numberBetween } from "../../../src/core/show/index.ts";

describe("cue numbers", () => {
	it("puts a cue between its neighbours with as few digits as that takes", () => {
		expect(numberBetween("12", "13")).toBe("12.5");
		expect(numberBetween("12", "14")).toBe("13");
		expect(numberBetween("12", "12.5")).toBe("12.2");
		expect(numberBetween("12", "12.1")).toBe("12.05");
		expect(numberBetween("12", null)).toBe("13");
		expect(numberBetween("12.5", null)).toBe("13");
		expect(numberBetween(null, "1")).toBe("0.5");
		expect(numberBetween(null, null)).toBe("1");
		expect(numberBetween("1", "900")).toBe("450");
	});

	it("never gives a number that is out already", () => {
		expect(numberBetween("12", "13", ["12", "12.5", "13"])).toBe("12.4");
		expect(numberBetween("12", null, ["12", "13", "14"])).toBe("15");
		expect(numberBetween("7", "7", ["7", "8"])).toBe("9");
		expect(numberBetween("GO", "13", ["GO", "13"])).toBe("14");
	});

	it("always finds room between two neighbours, however often one is put in", () => {
		fc.assert(
			fc.property(fc.array(fc.nat(1000), { minLength: 1, maxLength: 30 }), (picks) => {
				const list = ["1", "2"];
				for (const pick of picks) {
					const at = pick % (list.length - 1);
					const made = numberBetween(list[at], list[at + 1], list);
					expect(compareNumbers(list[at], made)).toBe(-1);
					expect(compareNumbers(made, list[at + 1])).toBe(-1);
					expect(list).not.toContain(made);
					list.splice(at + 1, 0, made);
				}
			}),
		);
	});
});
