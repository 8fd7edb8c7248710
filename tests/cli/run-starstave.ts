import { spawnSync } from "node:child_process";
import { mkdirSync, mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { afterAll } from "vitest";

/** Where the project lies. */
export const root = fileURLToPath(new URL("../../", import.meta.url));

export interface Run {
	readonly code: number | null;
	readonly stdout: string;
	readonly stderr: string;
}

/** A folder of its own with the built command line, gone when the file's tests are over. */
export function buildStarstave(): {
	readonly folder: string;
	run(...words: readonly string[]): Run;
	path(name: string): string;
} {
	const folder = mkdtempSync(join(tmpdir(), "starstave-test-"));
	const built = join(folder, "built");
	const work = join(folder, "work");
	mkdirSync(work);
	const build = spawnSync(process.execPath, [join(root, "scripts/build-cli.mjs"), built], {
		cwd: root,
		encoding: "utf8",
	});
	if (build.status !== 0) throw new Error(`the command line could not be built: ${build.stderr}`);
	afterAll(() => rmSync(folder, { recursive: true, force: true }));
	return {
		folder: work,
		path: (name) => join(work, name),
		run: (...words) => {
			const { status, stdout, stderr } = spawnSync(process.execPath, [join(built, "starstave.mjs"), ...words], {
				cwd: work,
				encoding: "utf8",
				maxBuffer: 1 << 28,
			});
			return { code: status, stdout, stderr };
		},
	};
}

/** The last line on stderr: what a command says when it refuses. */
export function complaint(run: Run): string {
	const lines = run.stderr.trimEnd().split("\n");
	return lines[lines.length - 1];
}
