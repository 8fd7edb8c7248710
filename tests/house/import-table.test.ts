import { readdirSync, readFileSync } from "node:fs";
import { dirname, join, relative, resolve } from "node:path";
import { describe, expect, it } from "vitest";
import biome from "../../biome.json";
import table from "../../scripts/import-table.json";

const root = resolve(import.meta.dirname, "../..");
const src = join(root, "src");
const allowed: Record<string, string[]> = table;

/** The folder of the table that a file belongs to: core/flight, ui …; null for the browser entry and what is untabled. */
function folderOf(file: string): string | null {
	const parts = relative(src, file).split("/");
	if (parts.length < 2) return null;
	return parts[0] === "core" ? `core/${parts[1]}` : (parts[0] ?? null);
}

function sourceFiles(folder: string): string[] {
	return readdirSync(folder, { withFileTypes: true, recursive: true })
		.filter((entry) => entry.isFile() && /\.(ts|tsx)$/.test(entry.name))
		.map((entry) => join(entry.parentPath, entry.name));
}

/** Every module that a file names in import, export … from, import() or new URL(…, import.meta.url). */
function importsOf(text: string): string[] {
	const found: string[] = [];
	const patterns = [
		/\b(?:import|export)\b[^'"`;]*?\bfrom\s*["']([^"']+)["']/g,
		/\bimport\s*["']([^"']+)["']/g,
		/\bimport\(\s*["']([^"']+)["']/g,
		/new URL\(\s*["']([^"']+)["']\s*,\s*import\.meta\.url/g,
	];
	for (const pattern of patterns) for (const match of text.matchAll(pattern)) found.push(match[1] ?? "");
	return found;
}

interface Breach {
	file: string;
	imports: string;
}

function breachesOf(file: string, text: string): Breach[] {
	const from = folderOf(file);
	if (from === null) return [];
	const breaches: Breach[] = [];
	for (const name of importsOf(text)) {
		if (name.startsWith("node:") && from.startsWith("core/")) breaches.push({ file, imports: name });
		if (!name.startsWith(".")) continue;
		const target = resolve(dirname(file), name);
		const to = folderOf(target);
		if (to === null || to === from) continue;
		const may = allowed[from] ?? [];
		const inCore =
			to.startsWith("core/") && may.includes("core/*") && !(from === "core/draft" && to === "core/handoff");
		if (!may.includes(to) && !inCore) breaches.push({ file: relative(root, file), imports: to });
		const insideAnotherCoreFolder = to.startsWith("core/") && !/\/index\.ts$/.test(target);
		if (insideAnotherCoreFolder)
			breaches.push({ file: relative(root, file), imports: `${name} (not by its index.ts)` });
	}
	return breaches;
}

describe("the import table", () => {
	const files = sourceFiles(src);

	it("knows every folder of src", () => {
		const folders = new Set(files.map(folderOf).filter((folder) => folder !== null));
		expect([...folders].filter((folder) => !(folder in allowed) && folder !== "training")).toEqual([]);
	});

	it("holds for every file", () => {
		expect(files.length).toBeGreaterThan(30);
		expect(files.flatMap((file) => breachesOf(file, readFileSync(file, "utf8")))).toEqual([]);
	});

	it("would catch an import that runs upward, a Node module in the core and a way round index.ts", () => {
		const at = join(src, "core/flight/plan.ts");
		expect(breachesOf(at, 'import { handOff } from "../handoff/index.ts";')).toHaveLength(1);
		expect(breachesOf(at, 'import fs from "node:fs";')).toHaveLength(1);
		expect(breachesOf(at, 'export type { Show } from "../show/show.ts";')).toHaveLength(1);
		expect(breachesOf(at, 'const run = () => import("../draft/index.ts");')).toHaveLength(1);
		expect(breachesOf(at, 'import type { Show } from "../show/index.ts";')).toEqual([]);
	});

	it("is what the lint rules say too", () => {
		const listed = new Set(biome.overrides.flatMap((override) => override.includes));
		for (const folder of Object.keys(allowed)) expect(listed).toContain(`src/${folder}/**`);
	});
});
