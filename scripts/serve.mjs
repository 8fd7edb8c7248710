// Serves the built app on its one fixed address. The browser keeps autosaves by address, so it does not move by itself.
import { createReadStream, statSync } from "node:fs";
import { createServer } from "node:http";
import { extname, join, normalize } from "node:path";
import { pathToFileURL } from "node:url";
import { root } from "./setup/say.mjs";

export const DEFAULT_PORT = 4862;

const types = {
	".html": "text/html; charset=utf-8",
	".js": "text/javascript; charset=utf-8",
	".css": "text/css; charset=utf-8",
	".json": "application/json; charset=utf-8",
	".svg": "image/svg+xml",
	".png": "image/png",
	".woff2": "font/woff2",
	".wasm": "application/wasm",
	".ogg": "audio/ogg",
	".mp3": "audio/mpeg",
	".wav": "audio/wav",
	".txt": "text/plain; charset=utf-8",
};

/** A static server over `folder`; GET and HEAD only, nothing outside the folder. */
export function createAppServer(folder) {
	return createServer((request, response) => {
		const refuse = (status, text) => response.writeHead(status, { "content-type": "text/plain" }).end(text);
		if (request.method !== "GET" && request.method !== "HEAD") return refuse(405, "Only GET is answered here.");
		let path;
		try {
			path = decodeURIComponent(new URL(request.url, "http://localhost").pathname);
		} catch {
			return refuse(400, "That is not an address.");
		}
		const file = join(folder, normalize(path.endsWith("/") ? `${path}index.html` : path));
		if (!file.startsWith(folder)) return refuse(404, "Nothing is there.");
		let size;
		try {
			const stat = statSync(file);
			if (!stat.isFile()) return refuse(404, "Nothing is there.");
			size = stat.size;
		} catch {
			return refuse(404, "Nothing is there.");
		}
		const hashed = path.startsWith("/assets/");
		response.writeHead(200, {
			"content-type": types[extname(file)] ?? "application/octet-stream",
			"content-length": size,
			"cache-control": hashed ? "public, max-age=31536000, immutable" : "no-cache",
			"x-content-type-options": "nosniff",
			"referrer-policy": "no-referrer",
			"cross-origin-opener-policy": "same-origin",
			"content-security-policy": "frame-ancestors 'none'",
		});
		if (request.method === "HEAD") return response.end();
		createReadStream(file).pipe(response);
	});
}

function main() {
	const port = Number(process.env.STARSTAVE_PORT ?? DEFAULT_PORT);
	const server = createAppServer(join(root, "dist"));
	server.on("error", (error) => {
		if (error.code !== "EADDRINUSE") throw error;
		console.error(
			`Port ${port} of 127.0.0.1 is taken, perhaps by another Starstave: open http://127.0.0.1:${port}/, or end that program, or set STARSTAVE_PORT to another port (autosaves stay with their port).`,
		);
		process.exit(1);
	});
	server.listen(port, "127.0.0.1", () => console.log(`Starstave is at http://127.0.0.1:${port}/  (Ctrl-C ends it)`));
	const end = () => process.exit(0);
	process.on("SIGINT", end);
	process.on("SIGTERM", end);
	process.on("SIGHUP", end);
	// When npm is stopped hard, nobody tells this process: it notices that its parent has changed.
	const parent = process.ppid;
	setInterval(() => process.ppid !== parent && end(), 1000).unref();
}

if (import.meta.url === pathToFileURL(process.argv[1]).href) main();
