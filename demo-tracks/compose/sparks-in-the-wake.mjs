// "Sparks in the Wake": the last ferry, and the sea alight behind it. Electronic, F♯ minor, 4/4 at 132.

import { clap, cymbal, hat, impact, kick, rim, riser, shake, snare } from "./drums.mjs";
import { leadVoices } from "./pitch.mjs";
import { chime, tines } from "./plucked.mjs";
import { bassLine, heldChords, Score, vary } from "./score.mjs";
import { ARPEGGIO, bass, choir, LEAD, STRINGS, saws, WALL } from "./sustained.mjs";

const part = (letter, name, bars) => ({ letter, name, stretches: [{ bars, beats: 4, bpm: 132 }] });

export const score = new Score({
	file: "sparks-in-the-wake",
	title: "Sparks in the Wake",
	start: 0.4,
	form: [
		part("A", "Cast off", 8),
		part("B", "Past the last buoy", 8),
		part("C", "Sea on fire", 8),
		part("D", "Engines stopped", 8),
		part("C", "Sea on fire", 8),
		part("A", "The far lights", 8),
	],
});

const HARMONY = {
	A: "F#m9 | Dmaj9 | Aadd9 | E/G# | F#m9 | Dmaj9 | Aadd9 | E/G#",
	B: "Bm7 | F#m7 | Dmaj7 | E | Bm7 | F#m7 | Dmaj7 | E7sus4 E",
	C: "Dmaj7 | E | F#m7 | A/C# | Dmaj7 | E | F#m7 | C#m7 E",
	D: "Dmaj9 | A/C# | Bm9 | F#m7 | Dmaj9 | A/C# | Bm9 | E7sus4 E",
};

const MELODY = {
	hook: "F#5:3 E5:3 C#5:2 | B4:3 C#5:3 E5:2 | F#5:3 E5:3 A5:2 | E5:3 C#5:3 B4:2 | F#5:3 E5:3 C#5:2 | B4:3 C#5:3 E5:2 | A5:3 G#5:3 E5:2 | F#5:3 E5:1 C#5:2 E5:2",
	stopped:
		"F#5:4 E5:4 | E5:2 C#5:2 A4:4 | D5:3 C#5:1 D5:2 F#5:2 | C#5:6 A4:2 | F#5:3 E5:3 C#5:2 | E5:3 C#5:3 A4:2 | F#5:3 E5:3 D5:2 | E5:6 r:2",
};

// Sixteenths of the arpeggio: which voice, and how loud. The beats lead.
const ORDER = [0, 2, 3, 1, 0, 3, 2, 3, 0, 2, 3, 4, 1, 3, 2, 4];

function arpeggio(harmony, velocity) {
	const voicings = leadVoices(harmony, { voices: 4, low: 57, high: 78 });
	return harmony.flatMap(({ at, length }, i) =>
		Array.from({ length: Math.round(length * 4) }, (_, n) => {
			const voice = ORDER[n % 16];
			const pitch = voice === 4 ? voicings[i][0] + 12 : voicings[i][voice];
			return {
				at: at + n / 4,
				length: 0.2,
				pitch,
				velocity: velocity * (n % 4 === 0 ? 1.15 : n % 2 === 0 ? 0.85 : 0.66),
			};
		}),
	);
}

/** Bass in sixteenths that leaves the beat itself to the drum, an octave up at the end of every second beat. */
function engine(harmony, velocity) {
	return bassLine(harmony, 35).flatMap(({ at, length, pitch }) =>
		Array.from({ length: Math.round(length * 4) }, (_, n) => ({
			at: at + n / 4,
			length: 0.2,
			pitch: n % 8 === 7 ? pitch + 12 : pitch,
			velocity: velocity * [0.95, 0.6, 0.85, 0.7][n % 4],
		})),
	);
}

/** Chords in the rhythm of the hook: 3 + 3 + 2 eighths. */
function stabs(harmony, voicings, velocity) {
	return harmony.flatMap(({ at, length }, i) =>
		[
			[0, 1.4],
			[1.5, 1.4],
			[3, 0.9],
		]
			.filter(([offset]) => offset < length)
			.flatMap(([offset, long]) =>
				voicings[i].map((pitch) => ({ at: at + offset, length: Math.min(long, length - offset), pitch, velocity })),
			),
	);
}

function tracks() {
	const chords = {};
	for (const [letter, text] of Object.entries(HARMONY))
		chords[letter] = score.barsOf(letter).map((bar) => score.harmony(bar, text));
	const [a1, a2] = chords.A;
	const [b] = chords.B;
	const [c1, c2] = chords.C;
	const [d] = chords.D;
	const hooks = [17, 33].map((bar) => score.melody(bar, MELODY.hook, { velocity: 0.88, hold: 0.9 }));
	const stopped = score.melody(25, MELODY.stopped, { velocity: 0.7 });
	const wide = { voices: 5, low: 54, high: 79 };
	const secondsOf = (bar) => score.secondsAt(score.beatOf(bar));
	// The filter of the arpeggio opens through the first part and closes through the last.
	const sweep = (seconds) => {
		const way = (from, to) => Math.min(1, Math.max(0, (seconds - secondsOf(from)) / (secondsOf(to) - secondsOf(from))));
		return (0.45 + 0.55 * way(1, 9)) * (1 - 0.6 * way(42, 49));
	};
	return [
		...drums(),
		{
			name: "engine",
			voice: (bus, note, random) =>
				bass(bus, note, random, {
					bite: 1500,
					last: 0.3,
					sustain: 0.3,
					resonance: 2.2,
					drive: 2,
					edge: 0.9,
					release: 0.04,
				}),
			notes: [
				...engine(b, 0.8),
				...engine(c1, 1),
				...vary(bassLine(d.slice(0, 4), 35), () => ({ velocity: 0.6 })),
				...vary(bassLine(d.slice(4), 35), () => ({ velocity: 0.7 })),
				...engine(c2, 1),
				...vary(bassLine(a2, 35), ({ length }) => ({ velocity: 0.7, length: length * 0.9 })),
			],
			level: -18,
			high: 4500,
			duck: 0.75,
			ride: [
				[9, -3],
				[16, -1],
				[17, 0],
				[24.9, 0],
				[25, -5],
				[33, 0],
				[41, -3],
			],
		},
		{
			name: "arpeggio",
			voice: (bus, note, random) => saws(bus, note, random, { ...ARPEGGIO, sweep }),
			notes: [
				...arpeggio(a1, 0.8),
				...arpeggio(b, 0.75),
				...arpeggio(c1, 0.75),
				...arpeggio(d.slice(4), 0.6),
				...arpeggio(c2, 0.8),
				...arpeggio(a2, 0.8),
			],
			level: -22.5,
			low: 220,
			room: 0.2,
			echo: 0.3,
			duck: 0.4,
			ride: [
				[1, 0],
				[9, -1],
				[17, -3],
				[25, -4],
				[32, 0],
				[33, -3],
				[41, 0],
			],
		},
		{
			name: "wall",
			voice: (bus, note, random) => saws(bus, note, random, WALL),
			notes: [c1, c2].flatMap((harmony) => stabs(harmony, leadVoices(harmony, wide), 0.8)),
			level: -20.5,
			low: 190,
			bell: [[300, -2, 0.8]],
			room: 0.25,
			duck: 0.55,
		},
		{
			name: "hook",
			voice: (bus, note, random) => saws(bus, note, random, LEAD),
			notes: [...hooks[0], ...hooks[1]],
			level: -21,
			low: 250,
			high: 9500,
			room: 0.22,
			echo: 0.24,
			duck: 0.15,
		},
		{
			name: "sparks",
			voice: (bus, note, random) => chime(bus, note, random, { partials: "bar", ring: 0.6 }),
			notes: [
				...vary(hooks[1], ({ pitch, velocity }) => ({ pitch: pitch + 12, velocity: velocity * 0.6 })),
				...vary(stopped, ({ pitch, velocity }) => ({ pitch: pitch + 12, velocity: velocity * 0.8 })),
				// Sparks fly up on the off-beats of the second part.
				...b.flatMap(({ at, length, chord }, i) =>
					[0.5, 2.5]
						.filter((offset) => offset < length)
						.map((offset, j) => ({
							at: at + offset,
							length: 0.5,
							pitch: 84 + ((chord.classes[(i + j) % 3] - 84 + 120) % 12),
							velocity: 0.5,
						})),
				),
			],
			level: -26.5,
			place: 0.2,
			low: 500,
			room: 0.4,
			echo: 0.4,
		},
		{
			name: "keys",
			voice: (bus, note, random) => tines(bus, note, random, { bright: 0.9 }),
			notes: [
				...stabs(b, leadVoices(b, { voices: 4, low: 54, high: 74 }), 0.62),
				...stopped,
				...heldChords(d.slice(0, 4), leadVoices(d.slice(0, 4), { voices: 4, low: 54, high: 74 }), {
					velocity: 0.55,
					tie: false,
				}),
			],
			level: -22.5,
			place: -0.15,
			low: 150,
			room: 0.3,
			echo: 0.2,
			duck: 0.2,
		},
		{
			name: "pad",
			voice: (bus, note, random) => saws(bus, note, random, STRINGS),
			notes: [a1.slice(4), b, d, a2].flatMap((harmony) =>
				heldChords(harmony, leadVoices(harmony, { voices: 4, low: 52, high: 74 }), { velocity: 0.6 }),
			),
			level: -25,
			low: 180,
			room: 0.4,
			duck: 0.5,
			ride: [
				[5, -8],
				[9, -2],
				[25, 0],
				[41, -2],
				[47, -4],
				[49, -14],
			],
		},
		{
			name: "choir",
			voice: (bus, note, random) => choir(bus, note, random),
			notes: [d.slice(2), c2].flatMap((harmony) =>
				heldChords(harmony, leadVoices(harmony, { voices: 4, low: 57, high: 76 }), { velocity: 0.7 }),
			),
			level: -26,
			low: 250,
			room: 0.5,
			duck: 0.4,
			ride: [
				[27, -8],
				[32.7, 0],
			],
		},
	];
}

function drums() {
	const beat = (bar, bars, text, gain = 1) => score.strokes(bar, bars, text, { gain });
	const hit = (bar, velocity) => ({ at: score.beatOf(bar), length: 1, pitch: 60, velocity });
	const both = (make) => [17, 33].flatMap(make);
	return [
		{
			name: "kick",
			voice: (bus, note, random) => kick(bus, note, random, { from: 210, to: 50, last: 0.11, click: 0.7 }),
			notes: [
				...beat(5, 4, "7...7...7...7...", 0.8),
				...beat(9, 7, "9...9...9...9..."),
				...beat(16, 1, "9...9...9......."),
				...both((bar) => beat(bar, 7, "9...9...9...9...")),
				...both((bar) => beat(bar + 7, 1, "9...9...9...9.9.")),
				...beat(29, 3, "7...7...7...7..."),
				...beat(32, 1, "8...8...8......."),
				...beat(41, 6, "9...9...9...9...", 0.9),
			],
			level: -15.5,
			ride: [
				[5, -6],
				[9, -1.5],
				[17, 0],
				[25, 0],
				[29, -6],
				[33, 0],
				[41, -2.5],
				[47, -5],
			],
		},
		{
			name: "clap",
			voice: clap,
			notes: [
				...beat(9, 7, "....7.......7..."),
				...both((bar) => beat(bar, 8, "....9.......9...")),
				...beat(41, 4, "....6.......6..."),
			],
			level: -22,
			room: 0.24,
		},
		{
			name: "snare roll",
			voice: (bus, note, random) => snare(bus, note, random, { tune: 200, last: 0.08 }),
			notes: [
				...beat(15, 1, "4...4...5...5..."),
				...beat(16, 1, "5.5.6.6.7777...."),
				...both((bar) => beat(bar, 8, "....6.......6...")),
				...beat(29, 2, "4...4...5...5..."),
				...beat(31, 1, "5.5.5.5.6.6.6.6."),
				...beat(32, 1, "666677778888...."),
			],
			level: -23,
			low: 160,
			room: 0.2,
			ride: [
				[15, -4],
				[17, -1],
				[28, -6],
				[32.7, 0],
				[33, -1],
			],
		},
		{
			name: "hats",
			voice: (bus, note, random) => hat(bus, note, random),
			notes: [
				...beat(3, 2, "5...4...5...4..."),
				...beat(5, 4, "5.3.4.3.5.3.4.3."),
				...beat(9, 8, "6354635463546354"),
				...both((bar) => beat(bar, 8, "7354735473547354")),
				...beat(41, 6, "5.3.4.3.5.3.4.3."),
				...beat(47, 2, "4...3...4...3..."),
			],
			level: -34,
			place: 0.2,
			low: 5000,
		},
		{
			name: "open hats",
			voice: (bus, note, random) => hat(bus, note, random, { last: 0.1 }),
			notes: [...beat(13, 4, "..5...5...5...5."), ...both((bar) => beat(bar, 8, "..7...7...7...7."))],
			level: -34,
			place: -0.2,
			low: 4500,
		},
		{
			name: "ride",
			voice: (bus, note, random) => cymbal(bus, note, random, { last: 0.25, ping: 0.7, body: 5000 }),
			notes: beat(33, 8, "7...7...7...7..."),
			level: -35,
			place: 0.35,
			low: 2500,
		},
		{
			name: "clock",
			voice: (bus, note, random) => rim(bus, note, random),
			notes: [...beat(1, 4, "5...4...5...4..."), ...beat(25, 4, "6...4...5...4...")],
			level: -30,
			place: 0.25,
			room: 0.35,
			echo: 0.2,
		},
		{
			name: "shaker",
			voice: shake,
			notes: [...both((bar) => beat(bar, 8, "4353435343534353")), ...beat(29, 4, "5.3.5.3.5.3.5.3.")],
			level: -38,
			place: -0.4,
		},
		{
			name: "crash",
			voice: (bus, note, random) => cymbal(bus, note, random, { last: 0.8 }),
			notes: [hit(9, 0.7), hit(17, 1), hit(21, 0.6), hit(25, 0.7), hit(33, 1), hit(37, 0.6), hit(41, 0.8)],
			level: -29.5,
			room: 0.2,
		},
		{
			name: "riser",
			voice: (bus, note, random) => riser(bus, note, random),
			notes: [
				{ at: score.beatOf(13), length: 15, pitch: 60, velocity: 0.8 },
				{ at: score.beatOf(29), length: 15, pitch: 60, velocity: 1 },
			],
			level: -31,
			room: 0.2,
		},
		{
			name: "impact",
			voice: impact,
			notes: [hit(17, 0.9), hit(25, 0.8), hit(33, 1), hit(41, 0.7)],
			level: -26,
			room: 0.3,
		},
	];
}

/** Everything the desk needs. */
export function compose() {
	return {
		score,
		tracks: tracks(),
		room: { seconds: 2.2, damp: 5200, before: 0.012 },
		echoBeats: 0.75,
		duckOn: "kick",
		fader: [
			[1, 0],
			[9, -1],
			[16, -1],
			[17, 0],
			[24.9, 0],
			[25, 0.5],
			[33, 0.3],
			[41, -1],
		],
		tail: 3,
		mastering: { loudness: -14.5, ceiling: -2.6, ratio: 1.8 },
	};
}
