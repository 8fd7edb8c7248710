// Drums of "Lamps for the Returning Boats". One character is a sixteenth, nine is loudest.

import { cymbal, hat, impact, kick, quayDrum, rim, riser, shake, snare, tom } from "./drums.mjs";

const at = (score, bar, beat, velocity, length = 1) => ({ at: score.beatOf(bar, beat), length, pitch: 60, velocity });

/** Toms from high to low, [[sixteenth, pitch, velocity], …] in one bar. */
function fill(score, bar, strokes) {
	return strokes.map(([step, pitch, velocity]) => ({ at: score.beatOf(bar, step / 4), length: 0.25, pitch, velocity }));
}

const SMALL_FILL = [
	[12, 55, 0.6],
	[13, 55, 0.55],
	[14, 50, 0.7],
	[15, 45, 0.75],
];
const BIG_FILL = [
	[8, 57, 0.7],
	[9, 57, 0.6],
	[10, 55, 0.75],
	[11, 53, 0.7],
	[12, 50, 0.85],
	[13, 48, 0.8],
	[14, 45, 0.95],
	[15, 41, 1],
];

/** The drum tracks, the kick first: it is what the others make way for. */
export function lampsDrums(score) {
	const beat = (bar, bars, text, gain = 1) => score.strokes(bar, bars, text, { gain });
	const chorus = [25, 53];
	const both = (make) => chorus.flatMap(make);
	// Snare roll through the last two bars before the second chorus: quarters, eighths, sixteenths; beat 4 stays empty.
	const roll = [
		...beat(49, 2, "3...3...4...4...", 0.9),
		...beat(51, 1, "4.4.5.5.5.5.6.6."),
		...beat(52, 1, "6667777888899..."),
	];
	return [
		{
			name: "kick",
			voice: kick,
			notes: [
				...beat(5, 3, "5.......4......."),
				...beat(8, 1, "5.......4.....3."),
				...beat(9, 7, "9.....5.8......."),
				...beat(16, 1, "9.....5.8...6..."),
				...beat(17, 7, "9.......8.5....."),
				...beat(24, 1, "9...7...7...7.7."),
				...both((bar) => beat(bar, 11, "9...8...9...8.4.")),
				...both((bar) => beat(bar + 11, 1, "9...8...9.......")),
				...beat(37, 7, "9.....5.8....4.."),
				...beat(44, 1, "9.....5.8......."),
				...beat(65, 4, "7.......6......."),
				...beat(69, 3, "4..............."),
			],
			level: -16.5,
			bell: [
				[62, 1.5, 1],
				[350, -4, 0.9],
			],
			ride: [
				[1, -6],
				[9, -3],
				[24, -2],
				[25, 0],
				[36, 0],
				[37, -3],
				[45, -3],
				[52, 0],
				[64, 0],
				[65, -5],
				[69, -7],
			],
		},
		{
			name: "snare",
			voice: snare,
			notes: [
				...beat(17, 7, "....6.......6..."),
				...beat(24, 1, "....6...5.5.6677"),
				...both((bar) => beat(bar, 3, "....9.......9...")),
				...both((bar) => beat(bar + 3, 1, "....9.......9.35")),
				...both((bar) => beat(bar + 4, 3, "....9.......9...")),
				...both((bar) => beat(bar + 7, 1, "....9.....6.7777")),
				...both((bar) => beat(bar + 8, 3, "....9.......9...")),
				...both((bar) => beat(bar + 11, 1, "....9...........")),
				...beat(44, 1, "............4.4."),
				...roll,
			],
			level: -20,
			low: 110,
			bell: [
				[210, 2, 1],
				[4800, 2, 0.8],
			],
			room: 0.2,
			ride: [
				[17, -4],
				[24, -4],
				[25, 0],
				[48.9, 0],
				[49, -12],
				[51, -8],
				[52.75, -1],
				[53, 0],
			],
		},
		{
			name: "rim",
			voice: (bus, note, random) => rim(bus, note, random),
			notes: [
				...beat(9, 7, "....7.......7..."),
				...beat(16, 1, "....7.......7.5."),
				...beat(37, 7, "....8.......8..."),
				...beat(44, 1, "....8.......8..."),
				// The lamps held still: a clock somewhere on the quay.
				...beat(45, 4, "5...4...5...4..."),
				...beat(65, 4, "....6.......6..."),
			],
			level: -27,
			place: 0.12,
			room: 0.3,
		},
		{
			name: "shaker",
			voice: shake,
			notes: [
				...beat(3, 2, "4.3.4.3.4.3.4.3."),
				...beat(5, 4, "5.3.4.3.5.3.4.3."),
				...beat(9, 8, "5354535453545354", 0.8),
				...beat(37, 8, "5354535453545354", 0.9),
				...beat(65, 4, "5.3.4.3.5.3.4.3."),
			],
			level: -35,
			place: -0.4,
			room: 0.1,
			ride: [
				[1, -4],
				[9, 0],
			],
		},
		{
			name: "hats",
			voice: (bus, note, random) => hat(bus, note, random),
			notes: [
				...beat(17, 8, "6.4.5.4.6.4.5.4."),
				...both((bar) => beat(bar, 11, "7354735473547354")),
				...beat(41, 3, "5...4...5...4..."),
			],
			level: -35,
			place: 0.3,
			low: 5000,
		},
		{
			name: "open hats",
			voice: (bus, note, random) => hat(bus, note, random, { last: 0.13 }),
			notes: both((bar) => beat(bar, 11, "..7...7...7...7.")),
			level: -36.5,
			place: 0.25,
			low: 4500,
		},
		{
			name: "tambourine",
			voice: (bus, note, random) => shake(bus, note, random, { last: 0.07, bright: 8200, jingles: 1 }),
			notes: [...beat(17, 8, "....5.......5..."), ...both((bar) => beat(bar, 11, "....7.......7.3."))],
			level: -36,
			place: -0.3,
			room: 0.15,
		},
		{
			name: "toms",
			voice: tom,
			notes: [
				...fill(
					score,
					8,
					SMALL_FILL.map(([s, p, v]) => [s, p, v * 0.55]),
				),
				...fill(score, 16, SMALL_FILL),
				...fill(score, 24, BIG_FILL),
				...fill(score, 28, SMALL_FILL),
				...fill(score, 32, BIG_FILL.slice(2)),
				...fill(score, 36, [
					[8, 50, 0.9],
					[10, 48, 0.8],
					[12, 45, 0.7],
					[14, 41, 0.6],
				]),
				...fill(
					score,
					44,
					SMALL_FILL.map(([s, p, v]) => [s, p, v * 0.7]),
				),
				...fill(score, 56, SMALL_FILL),
				...fill(score, 60, BIG_FILL),
				...fill(score, 64, [
					[8, 50, 0.9],
					[10, 48, 0.8],
					[12, 45, 0.7],
					[14, 41, 0.6],
				]),
			],
			level: -23.5,
			room: 0.24,
		},
		{
			name: "quay drum",
			voice: quayDrum,
			notes: [
				...[25, 29, 33, 36, 45, 53, 57, 61, 64, 65].map((bar) => at(score, bar, 0, 0.9)),
				...beat(49, 2, "5.......6......."),
				...beat(51, 1, "6...6...7...7..."),
				...beat(52, 1, "7...8...9......."),
				...[69, 71].map((bar) => at(score, bar, 0, 0.45)),
				at(score, 72, 0, 0.7),
			],
			level: -26,
			room: 0.35,
		},
		{
			name: "crash",
			voice: (bus, note, random) => cymbal(bus, note, random, { last: 0.85 }),
			notes: [
				at(score, 17, 0, 0.45),
				...both((bar) => [at(score, bar, 0, 1), at(score, bar + 4, 0, 0.75), at(score, bar + 8, 0, 0.85)]),
				at(score, 45, 0, 0.5),
				at(score, 65, 0, 0.7),
			],
			level: -29,
			place: -0.2,
			room: 0.2,
		},
		{
			name: "ride",
			voice: (bus, note, random) => cymbal(bus, note, random, { last: 0.3, ping: 0.8, body: 5200 }),
			notes: [...beat(53, 11, "7...5.4.6...5.4."), ...beat(37, 4, "4...3...4...3...")],
			level: -36,
			place: 0.4,
			low: 2500,
		},
		{
			name: "riser",
			voice: (bus, note, random) => riser(bus, note, random),
			notes: [
				{ at: score.beatOf(23), length: 8, pitch: 60, velocity: 0.7 },
				// Ends a beat early: the silence before the chorus is what makes it fall in.
				{ at: score.beatOf(49), length: 15.25, pitch: 60, velocity: 1 },
			],
			level: -33,
			room: 0.2,
		},
		{
			name: "impact",
			voice: impact,
			notes: [at(score, 25, 0, 0.8), at(score, 45, 0, 0.7), at(score, 53, 0, 1)],
			level: -27,
			room: 0.3,
		},
	];
}
