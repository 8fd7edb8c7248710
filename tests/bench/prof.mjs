import { build } from "rolldown"; import { spawnSync } from "node:child_process";
await build({ input: "tests/bench/exp.ts", platform: "node", logLevel: "warn", external: ["music-tempo"], output: { file: "node_modules/.exp.mjs", format: "esm", codeSplitting: false } });
