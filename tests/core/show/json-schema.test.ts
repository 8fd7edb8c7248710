import { spawnSync } from "node:child_process";
import { fileURLToPath } from "node:url";
import { describe, expect, it } from "vitest";

describe("the published JSON Schema", () => {
	it("is the one that the program's own definition gives", () => {
		const script = fileURLToPath(new URL("../../../scripts/write-schema.mjs", import.meta.url));
		const run = spawnSync(process.execPath, [script, "--check"], { encoding: "utf8" });
		expect(run.stderr).toBe("");
		expect(run.status).toBe(0);
	});
});
