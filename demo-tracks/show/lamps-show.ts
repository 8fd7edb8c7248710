/**
 * The demo show, cut by hand to "Lamps for the Returning Boats": 200 drones over a harbour of our own invention.
 * `node demo-tracks/show/cut.mjs` writes it; it must fly as it stands, or nothing is written.
 */
import { readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { decodeAudio } from "../../src/core/decode/index.ts";
import { flyShow } from "../../src/core/flight/index.ts";
import { fleetSlotsOf, readSvg, sizeToSpacing, slotsOf, takeoffSlots } from "../../src/core/formation/index.ts";
import { compileLight, findFlashes } from "../../src/core/light/index.ts";
import { sha256Hex } from "../../src/core/maths/index.ts";
import { analyse } from "../../src/core/music/index.ts";
import { type Formation, readShow, type Shape, writeShow } from "../../src/core/show/index.ts";

const folder = process.argv[2] ?? ".";
const TRACK = "lamps-for-the-returning-boats.ogg";
const DRONES = 200;
const limits = { spacing: 1.5, downwash: 2 };
const truth = JSON.parse(readFileSync(join(folder, TRACK.replace(".ogg", ".truth.json")), "utf8")) as {
	title: string;
	beats: number[];
	bars: { beat: number; beatsPerBar: number }[];
	sections: { start: number; letter: string; name: string }[];
};
const svg = (name: string, count: number) => readSvg(readFileSync(join(folder, "show", name), "utf8"), name, { count });

/** A formation at the spacing that suits it, its middle `up` metres high and `away` from the audience. */
function place(
	id: string,
	name: string,
	shape: Shape,
	margin: number,
	up: number,
	away = 45,
	tilt = 0,
	turn = 0,
): Formation {
	const sized = sizeToSpacing(shape, limits, margin, tilt);
	return { id, name, shape: sized, place: { position: [0, away, up], turn, tilt, scale: 1 } };
}

const formations = [
	place("sea", "the sea", { kind: "wave", columns: 25, rows: 8, pitch: 2, rise: 3, wavelength: 22 }, 1.45, 32),
	place("lighthouse", "the lighthouse", svg("lighthouse.svg", 132), 1.06, 46, 40),
	place("rings", "lanterns on the water", { kind: "disc", count: DRONES, radius: 12 }, 1.42, 42, 45, 62),
	place("boat", "the boat", svg("boat.svg", 124), 1.06, 46, 40),
	place("home", "HOME", { kind: "text", text: "HOME", height: 20, count: 168, style: "outline" }, 1.1, 48, 40),
	place(
		"spiral",
		"the stairs of the tower",
		{ kind: "helix", count: DRONES, radius: 11, height: 40, turns: 5 },
		1.42,
		55,
	),
	place("star", "the great lamp", { kind: "sphere", count: DRONES, radius: 12 }, 1.42, 50),
];

interface Arrival {
	readonly formation: string;
	/** Beat at which the picture stands, and beats that the way takes. */
	readonly at: number;
	readonly length: number;
	readonly light?: "keep" | "dim" | "dark" | "crossfade";
	readonly called?: boolean;
}
const arrivals: Arrival[] = JSON.parse(process.argv[3] ?? "null") ?? [
	{ formation: "lighthouse", at: 32, length: 26, light: "dim", called: true },
	{ formation: "rings", at: 64, length: 24, light: "crossfade" },
	{ formation: "boat", at: 96, length: 28, light: "dim", called: true },
	{ formation: "lighthouse", at: 144, length: 22, light: "crossfade" },
	{ formation: "spiral", at: 176, length: 18, light: "dim" },
	{ formation: "home", at: 208, length: 28, light: "dim", called: true },
	{ formation: "star", at: 232, length: 16, light: "keep" },
	{ formation: "sea", at: 276, length: 32, light: "crossfade" },
];

const colour = (at: number, paint: object, fade = 2, group = "all", name = "") => ({
	kind: "colour",
	at,
	paint,
	fade,
	group,
	name,
});
const level = (at: number, value: number | object, fade = 2, name = "") => ({
	kind: "intensity",
	at,
	level: value,
	fade,
	name,
});
const follow = (from: number, to: number) => ({ follow: "loudness", from, to });

const light = [
	level(0, follow(0.12, 0.6), 8, "first light"),
	colour(0, { kind: "gradient", from: "#173a8f", to: "#3f8fd0", axis: "up" }, 8, "all", "night water"),
	colour(
		16,
		{ kind: "glint", colour: "#ffd27a", background: "#2456b0", share: 0.14, every: 2 },
		4,
		"all",
		"first lamps",
	),
	colour(30, { kind: "picture" }, 4, "all", "the harbour wall"),
	level(32, follow(0.25, 0.85), 4),
	colour(
		40,
		{ kind: "band", colour: "#fff4d0", background: "#8a6a2a", axis: "right", width: 0.35, every: 8 },
		2,
		"beams",
		"the beams turn",
	),
	colour(62, { kind: "interleave", colours: ["#ffb25e", "#ffd27a", "#e0486e"], every: 4 }, 4, "all", "lanterns"),
	colour(80, { kind: "gradient", from: "#ffe08a", to: "#d8742c", axis: "out" }, 4, "all", "one light"),
	level(94, follow(0.4, 1), 2, "the boats come home"),
	colour(94, { kind: "picture" }, 2, "all", "the boat"),
	colour(104, { kind: "swell", colour: "#fff0d8", every: 2, floor: 0.5 }, 2, "mainsail", "wind in the sail"),
	colour(142, { kind: "picture" }, 4, "all", "the wall again"),
	level(144, follow(0.25, 0.85), 4),
	colour(
		148,
		{ kind: "band", colour: "#fff4d0", background: "#8a6a2a", axis: "right", width: 0.35, every: 8 },
		2,
		"beams",
		"the beams turn",
	),
	colour(174, { kind: "gradient", from: "#2f5fd0", to: "#b8d8ff", axis: "up" }, 6, "all", "every lamp held still"),
	level(176, 0.35, 6, "held still"),
	colour(206, { kind: "gradient", from: "#f0a020", to: "#fff0c8", axis: "up" }, 2, "all", "home"),
	level(208, follow(0.45, 1), 1, "home"),
	colour(230, { kind: "swell", colour: "#ffd890", every: 2, floor: 0.4 }, 2, "all", "the great lamp"),
	colour(256, { kind: "glint", colour: "#ff9a4a", background: "#5a2a20", share: 0.3, every: 2 }, 6, "all", "embers"),
	colour(272, { kind: "gradient", from: "#173a8f", to: "#3f8fd0", axis: "up" }, 8, "all", "night water"),
	level(256, 0.3, 8, "embers"),
	level(278, 0, 10, "out"),
];

const beatAt = (seconds: number) => truth.beats.findIndex((beat) => Math.abs(beat - seconds) < 0.05);
const bytes = new Uint8Array(readFileSync(join(folder, TRACK)));
const samples = await decodeAudio(bytes, TRACK);
const analysis = analyse(samples);
const starts = truth.sections.map((section) => beatAt(section.start));
const timed = [
	...arrivals.map(({ formation, at, length, light: way, called }) => ({
		kind: "transition",
		at: at - length,
		length,
		formation,
		light: way ?? "keep",
		called: called ?? false,
		name: `to ${formations.find((one) => one.id === formation)?.name}`,
	})),
	...light,
].sort((a, b) => a.at - b.at);
const show = readShow(
	JSON.stringify({
		format: "starstave-show",
		version: 1,
		title: "Lantern Night at Sallow Point",
		notes: "Demo show. Harbour, names and music are our own inventions.",
		soundtrack: {
			file: TRACK,
			sha256: sha256Hex(bytes),
			duration: analysis.duration,
			sampleRate: samples.sampleRate,
			channels: samples.channels.length,
		},
		grid: { beats: truth.beats, bars: truth.bars, source: "edited" },
		sections: truth.sections.map((section, i) => ({
			id: `s${i + 1}`,
			letter: section.letter,
			name: section.name,
			from: starts[i],
			to: starts[i + 1] ?? truth.beats.length,
		})),
		fleet: { count: DRONES, spares: 8 },
		venue: {
			volume: { min: [-90, 0, 0], max: [90, 100, 120] },
			audience: { from: [-70, -30], to: [70, -30] },
			seat: [0, -60, 1.6],
			wind: 4,
		},
		opening: "sea",
		formations,
		cues: timed.map((cue, i) => ({ ...cue, id: `c${i + 1}`, number: String(i + 1) })),
	}),
);

for (const formation of formations) {
	const { positions, count } = slotsOf(formation, limits.downwash);
	const span = [0, 1, 2].map((axis) => {
		const values = positions.filter((_, i) => i % 3 === axis);
		return `${Math.min(...values).toFixed(0)}…${Math.max(...values).toFixed(0)}`;
	});
	console.log(formation.id.padEnd(12), count, "slots", span.join("  "));
}
const slots = fleetSlotsOf(show);
const flown = flyShow(show, slots, takeoffSlots(show));
const { check } = flown;
for (const leg of [check.launch, ...check.transitions, check.landing]) {
	if (!leg) continue;
	console.log(
		leg.id.padEnd(8),
		leg.to.padEnd(12),
		leg.available.toFixed(1),
		leg.needed?.toFixed(1) ?? "never",
		leg.straightLineBound.toFixed(1),
		leg.verdicts.join(" "),
		leg.gap?.distance.toFixed(3),
	);
}
const tooNear = check.formations.filter((one) => !one.verdicts.includes("flies"));
const flashes = findFlashes(compileLight(show, flown.flight.stays, slots, analysis.curves), 0, analysis.duration);
console.log("flies", check.flies, "endurance", check.endurance, "flashes", flashes.length, tooNear);
if (!check.flies || flashes.length > 0) process.exit(2);
writeFileSync(join(folder, TRACK.replace(".ogg", ".starstave.json")), writeShow(show));
