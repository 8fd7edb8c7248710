// Renders the demo music: node demo-tracks/compose/render.mjs [part of a name …] [--wav FOLDER]
// Writes NAME.ogg or NAME.mp3 and NAME.truth.json beside this folder. Needs ffmpeg; with --wav the uncompressed
// masters are kept as well.

import { execFileSync } from "node:child_process";
import { mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { mix } from "./desk.mjs";
import { readLameDelay } from "./lame.mjs";
import { integratedLoudness } from "./loudness.mjs";
import { master } from "./master.mjs";
import { RATE } from "./sound.mjs";
import { truthText } from "./truth.mjs";
import { wavBytes } from "./wav.mjs";

const PIECES = [
	{ name: "lamps-for-the-returning-boats", format: "ogg", quality: ["-c:a", "libvorbis", "-q:a", "4"] },
	{ name: "the-keeper-comes-down-dancing", format: "mp3", quality: ["-c:a", "libmp3lame", "-q:a", "3"] },
	{ name: "sparks-in-the-wake", format: "ogg", quality: ["-c:a", "libvorbis", "-q:a", "5"] },
];

const folder = dirname(dirname(fileURLToPath(import.meta.url)));
const words = process.argv.slice(2);
const keep = words.includes("--wav") ? words.splice(words.indexOf("--wav"), 2)[1] : null;
const verbose = words.includes("--verbose") && words.splice(words.indexOf("--verbose"), 1);
const scratch = mkdtempSync(join(tmpdir(), "demo-tracks-"));
if (keep) mkdirSync(keep, { recursive: true });

for (const { name, format, quality } of PIECES) {
	if (words.length > 0 && !words.some((word) => name.includes(word))) continue;
	const began = performance.now();
	const { compose } = await import(`./${name}.mjs`);
	const piece = compose();
	const mixed = mix({ ...piece, report: verbose ? (line) => console.log(`  ${line}`) : undefined });
	const mastered = master(mixed, piece.mastering);
	const wav = join(keep ?? scratch, `${name}.wav`);
	writeFileSync(wav, wavBytes(mastered));
	const out = join(folder, `${name}.${format}`);
	const title = `title=${piece.score.title}`;
	// Bit-exact: no date, no encoder build and no random stream number in the file.
	const plain = ["-map_metadata", "-1", "-fflags", "+bitexact", "-flags:a", "+bitexact", "-metadata", title];
	execFileSync("ffmpeg", ["-v", "error", "-y", "-i", wav, ...quality, ...plain, out]);
	const truth = piece.score.truth(mastered.left.length / RATE);
	if (format === "mp3") truth.encoderDelay = readLameDelay(readFileSync(out));
	writeFileSync(join(folder, `${name}.truth.json`), truthText(truth));
	const loudness = integratedLoudness(mastered.left, mastered.right).toFixed(1);
	const seconds = ((performance.now() - began) / 1000).toFixed(0);
	console.log(`${name}.${format}: ${truth.duration.toFixed(1)} s, ${loudness} LUFS, rendered in ${seconds} s`);
}
rmSync(scratch, { recursive: true });
