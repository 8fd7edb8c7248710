import { describe, expect, it } from "vitest";
import { MIGRATION_STEPS, migrate, SHOW_VERSION, versionOf } from "../../../src/core/show/index.ts";

describe("reading older versions", () => {
	it("has one step for every version before the newest", () => {
		expect(MIGRATION_STEPS.length).toBe(SHOW_VERSION - 1);
	});

	it("takes the steps in their order, from the file's own version on", () => {
		const steps = [
			(file: Readonly<Record<string, unknown>>) => ({ ...file, name: `${file.name} two` }),
			(file: Readonly<Record<string, unknown>>) => ({ ...file, name: `${file.name} three` }),
		];
		const old = { format: "starstave-show", version: 1, name: "one", kept: [1] };
		expect(migrate(old, steps, 3)).toEqual({ ...old, version: 3, name: "one two three" });
		expect(migrate({ ...old, version: 2 }, steps, 3)).toEqual({ ...old, version: 3, name: "one three" });
		expect(old.version).toBe(1);
	});

	it("refuses a newer version, and one that is none", () => {
		expect(() => migrate({ format: "starstave-show", version: 4 }, [], 3)).toThrow(/version is 4 .* up to 3/);
		for (const version of [0, 1.5, "1", null, undefined]) {
			expect(() => migrate({ format: "starstave-show", version })).toThrow(/must be a whole number from 1 to 1\.$/);
		}
	});

	it("tells the version of a show without reading the rest", () => {
		expect(versionOf({ format: "starstave-show", version: 9, cues: "broken" })).toBe(9);
		expect(versionOf({ format: "else", version: 9 })).toBeNull();
		expect(versionOf(null)).toBeNull();
	});
});
