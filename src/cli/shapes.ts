import type { CommandShape } from "./arguments.ts";

/** The commands as the user sees them: what must be given, which flags there are. */

export const analyseShape: CommandShape = {
	name: "analyse",
	summary: "hear a soundtrack: beats, bars, sections, loudness",
	operands: ["TRACK"],
	flags: [{ name: "--json", value: "FILE|-", help: "write the answer as JSON to a file, or to stdout" }],
	required: [],
	more: ["Seconds count from the first sample. WAV, MP3, FLAC, Ogg Vorbis, Opus (AAC: in the browser alone)."],
};

export const draftShape: CommandShape = {
	name: "draft",
	summary: "a rough cut: a show for a soundtrack, ready to fly and to be worked over",
	operands: ["TRACK"],
	flags: [
		{ name: "--drones", value: "N", help: "drones in the fleet" },
		{
			name: "--out",
			value: "SHOW",
			help: "where the show goes: *.starstave.json, or *.starstave with the soundtrack in it",
		},
		{ name: "--title", value: "TITLE", help: "the show's title; the soundtrack's name unless given" },
		{ name: "--seed", value: "N", help: "another number, another cut of the same music; 1 unless given" },
		{ name: "--force", value: null, help: "replace the show that stands there" },
		{ name: "--json", value: "FILE|-", help: "write the answer as JSON to a file, or to stdout" },
	],
	required: ["--drones", "--out"],
	more: [],
};

export const checkShape: CommandShape = {
	name: "check",
	summary: "feasibility of a whole show; 2 when any part of it can't be flown",
	operands: ["SHOW"],
	flags: [
		{ name: "--soundtrack", value: "FILE", help: "the show's audio, where it doesn't lie beside the show" },
		{ name: "--json", value: "FILE|-", help: "write the answer as JSON to a file, or to stdout" },
	],
	required: [],
	more: ["The answer counts launch, every transition, landing, every formation and endurance; flashes are a warning."],
};

export const retimeShape: CommandShape = {
	name: "retime",
	summary: "carry the cues over to a new edit of the soundtrack; 2 when anything needs review",
	operands: ["SHOW", "TRACK"],
	flags: [
		{ name: "--out", value: "SHOW", help: "where the retimed show goes; the old one is left as it is" },
		{ name: "--soundtrack", value: "FILE", help: "the show's old audio, where it doesn't lie beside the show" },
		{ name: "--force", value: null, help: "replace the show that stands there" },
		{ name: "--json", value: "FILE|-", help: "write the answer as JSON to a file, or to stdout" },
	],
	required: ["--out"],
	more: ["TRACK is the new edit. Both soundtracks are heard, so the old one must be at hand."],
};

export const handoffShape: CommandShape = {
	name: "handoff",
	summary: "every file for the crew; 2 when the show can't be flown, and nothing is written",
	operands: ["SHOW"],
	flags: [
		{ name: "--out", value: "DIR", help: "an empty or new folder" },
		{ name: "--rate", value: "10", help: "positions a second in the flight paths" },
		{ name: "--light-rate", value: "50", help: "colours a second" },
		{ name: "--timecode", value: "25", help: "frames a second: 24, 25, 29.97 (drop-frame) or 30" },
		{ name: "--timecode-start", value: "01:00:00:00", help: "timecode of the soundtrack's first sample" },
		{ name: "--draft", value: null, help: "hand off what can't be flown too, without flight paths and light" },
		{ name: "--soundtrack", value: "FILE", help: "the show's audio, where it doesn't lie beside the show" },
		{ name: "--json", value: "FILE|-", help: "write the answer as JSON to a file, or to stdout" },
	],
	required: ["--out"],
	more: ["Where the rate is too coarse for the file to be proven, it is raised, and that is said."],
};
