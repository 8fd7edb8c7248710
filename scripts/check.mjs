// npm test: format and lint, types, then every test (import table, core, browser). Ends with "N passed, N failed".
import { spawnSync } from "node:child_process";
import { mkdirSync, readFileSync, rmSync } from "node:fs";
import { join } from "node:path";
import { root } from "./setup/say.mjs";

const bin = (path) => join(root, "node_modules", path);
const steps = [
	["format and lint", [bin("@biomejs/biome/bin/biome"), "ci", "."]],
	["types of the core", [bin("typescript/bin/tsc"), "-p", "src/core"]],
	["types of everything", [bin("typescript/bin/tsc"), "-p", "."]],
];
let passed = 0;
let failed = 0;
for (const [name, command] of steps) {
	const run = spawnSync(process.execPath, command, { cwd: root, stdio: ["ignore", "inherit", "inherit"] });
	const good = run.status === 0;
	good ? passed++ : failed++;
	console.log(`${good ? "passed" : "FAILED"}: ${name}`);
}

// One after the other: side by side they would take each other's time, and a browser that is starved of it
// fails for nothing.
const skippedNames = [];
for (const project of ["core", "e2e"]) {
	const report = join(root, ".setup", `tests-${project}.json`);
	mkdirSync(join(root, ".setup"), { recursive: true });
	rmSync(report, { force: true });
	const run = spawnSync(
		process.execPath,
		[
			bin("vitest/vitest.mjs"),
			"run",
			"--project",
			project,
			"--reporter=default",
			"--reporter=json",
			`--outputFile.json=${report}`,
		],
		{ cwd: root, stdio: ["ignore", "inherit", "inherit"], env: { ...process.env, NODE_ENV: "test" } },
	);
	try {
		const result = JSON.parse(readFileSync(report, "utf8"));
		passed += result.numPassedTests;
		failed += result.numFailedTests;
		for (const file of result.testResults) {
			// A file that fell over before its first test has no failed test of its own.
			if (file.status === "failed" && !file.assertionResults.some((test) => test.status === "failed")) failed++;
			for (const test of file.assertionResults)
				if (test.status === "pending" || test.status === "skipped") skippedNames.push(test.fullName);
		}
		if (run.status !== 0 && result.numFailedTests === 0 && result.success) failed++;
	} catch {
		failed++;
		console.log(`FAILED: the ${project} tests ended without a report`);
	}
}
for (const name of skippedNames) console.log(`skipped: ${name}`);
console.log(`${passed} passed, ${failed} failed`);
process.exit(failed === 0 ? 0 : 1);
