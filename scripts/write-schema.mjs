// Publishes the JSON Schema of the show file from the one definition in src/core/show.
//   node scripts/write-schema.mjs           writes public/starstave-show.schema.json
//   node scripts/write-schema.mjs --check   exits 1 where the published file is out of date
import { readFileSync, writeFileSync } from "node:fs";
import { fileURLToPath } from "node:url";
import { toJsonSchema } from "@valibot/to-json-schema";
import { runnerImport } from "vite";

const root = fileURLToPath(new URL("..", import.meta.url));
const target = `${root}public/starstave-show.schema.json`;
const { module } = await runnerImport(`${root}src/core/show/index.ts`, { root, configFile: false, logLevel: "error" });

/**
 * Two checks have no word in JSON Schema: that a number is finite, which JSON guarantees, and that an id is no name
 * that objects reserve, which the reader sees to.
 */
const published = {
	title: "Starstave show",
	description:
		"A drone routine cut to a soundtrack. Seconds, metres, beats; x to the audience's right, y away from it, z up. Unknown keys are kept.",
	...toJsonSchema(module.showFile, { typeMode: "input", ignoreActions: ["finite", "check"] }),
};
const text = `${JSON.stringify(published, null, "\t")}\n`;

if (process.argv.includes("--check")) {
	let standing = "";
	try {
		standing = readFileSync(target, "utf8");
	} catch {
		// Not published yet: out of date like any other difference.
	}
	if (standing !== text) {
		console.error("public/starstave-show.schema.json is out of date; run node scripts/write-schema.mjs");
		process.exit(1);
	}
} else writeFileSync(target, text);
