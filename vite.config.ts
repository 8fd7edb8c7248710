import react from "@vitejs/plugin-react";
import { defineConfig, type Plugin } from "vite";

/** The development server puts scripts of its own into the page; the built page keeps its strict policy. */
function dropPolicyWhileDeveloping(): Plugin {
	return {
		name: "drop-policy-while-developing",
		apply: "serve",
		transformIndexHtml: (html) => html.replace(/<meta\s+http-equiv="Content-Security-Policy"[^>]*>/, ""),
	};
}

export default defineConfig({
	plugins: [react(), dropPolicyWhileDeveloping()],
	worker: { format: "es" },
	build: {
		target: "es2023",
		sourcemap: false,
		// An address made of data would be a request that the page's policy forbids.
		assetsInlineLimit: 0,
		chunkSizeWarningLimit: 900,
	},
});
