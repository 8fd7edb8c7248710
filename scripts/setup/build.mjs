import { spawnSync } from "node:child_process";
import { createHash } from "node:crypto";
import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { root, say, stop } from "./say.mjs";

const products = {
	app: {
		made: "dist/index.html",
		command: ["node", join(root, "node_modules/vite/bin/vite.js"), "build", "--logLevel", "warn"],
		from: ["src", "public", "demo-tracks", "index.html", "vite.config.ts", "package-lock.json"],
		name: "the app",
	},
	cli: {
		made: "dist-cli/starstave.mjs",
		command: ["node", join(root, "scripts/build-cli.mjs")],
		from: ["src", "scripts/build-cli.mjs", "package-lock.json"],
		name: "the command line",
	},
};

/** Builds what is missing or older than its sources (told by content, so that a checkout's dates don't matter). */
export function ensureBuild(wanted) {
	mkdirSync(join(root, ".setup"), { recursive: true });
	for (const which of wanted) {
		const product = products[which];
		const stampFile = join(root, ".setup", `${which}.sha256`);
		const stamp = fingerprint(product.from);
		if (existsSync(join(root, product.made)) && existsSync(stampFile) && readFileSync(stampFile, "utf8") === stamp)
			continue;
		say(`Building ${product.name} …`);
		const run = spawnSync(product.command[0], product.command.slice(1), {
			cwd: root,
			stdio: ["ignore", 2, 2],
			env: { ...process.env, NODE_ENV: "production" },
		});
		if (run.status !== 0) stop(`Building ${product.name} failed: what is wrong stands above.`);
		writeFileSync(stampFile, stamp);
	}
}

function fingerprint(paths) {
	const hash = createHash("sha256");
	const walk = (path) => {
		const full = join(root, path);
		if (!existsSync(full)) return;
		let entries;
		try {
			entries = readdirSync(full, { withFileTypes: true });
		} catch {
			hash.update(`${path}\0`).update(readFileSync(full));
			return;
		}
		for (const entry of entries.sort((a, b) => (a.name < b.name ? -1 : 1))) walk(join(path, entry.name));
	};
	for (const path of paths) walk(path);
	return hash.digest("hex");
}
