// Who plays what in "The Keeper Comes Down Dancing". Bars: A 1, B 17, C 33 (four beats), D 41, A 45, E 61.

import { clap, cymbal, kick, quayDrum, rim, riser, shake, snare, tom } from "./drums.mjs";
import { leadVoices } from "./pitch.mjs";
import { chime, pluck } from "./plucked.mjs";
import { bassLine, heldChords, secondVoice, vary } from "./score.mjs";
import { bass, CELLO, HORN, reed, STRINGS, saws, whistle } from "./sustained.mjs";

/** "Pah-pah": the chord short on the second and third beat of a waltz bar. */
function pahPah(harmony, voicings, velocity) {
	return harmony.flatMap(({ at }, i) =>
		[1, 2].flatMap((beat) =>
			voicings[i].map((pitch) => ({ at: at + beat, length: 0.6, pitch, velocity: velocity * (beat === 1 ? 1 : 0.86) })),
		),
	);
}

/** Broken chords in eighths over a bar of any length, the bass first. */
function broken(harmony, voicings, roots, velocity) {
	return harmony.flatMap(({ at, length }, i) => {
		const order = [roots[i].pitch, ...voicings[i], voicings[i][2], voicings[i][1], voicings[i][0] + 12];
		return Array.from({ length: Math.round(length * 2) }, (_, n) => ({
			at: at + n / 2,
			length: 1.6,
			pitch: order[n % order.length],
			velocity: velocity * (n === 0 ? 1.15 : n % 2 === 0 ? 1 : 0.62),
		}));
	});
}

/** The tracks of the piece. */
export function arrangeKeeper(score, HARMONY, MELODY) {
	const chords = {};
	for (const [letter, text] of Object.entries(HARMONY))
		chords[letter] = score.barsOf(letter).map((bar) => score.harmony(bar, text));
	const [a1, a2] = chords.A;
	const [b] = chords.B;
	const [c] = chords.C;
	const [d] = chords.D;
	const [e] = chords.E;
	const middle = { voices: 3, low: 55, high: 71 };
	const voiced = (harmony, range = middle) => leadVoices(harmony, range);
	const up = (notes, semitones) => vary(notes, ({ pitch }) => ({ pitch: pitch + semitones }));
	const beat = (bar, bars, text, gain = 1) => score.strokes(bar, bars, text, { gain });
	const lastBar = e.slice(7);
	const dance = e.slice(0, 7);
	const deep = (harmony, velocity, share = 0.9) =>
		bassLine(harmony, 40).map((note) => ({ ...note, length: Math.min(note.length, share), velocity }));
	// The bass walks: root on one, in every second bar the fifth on three.
	const oom = (harmony, velocity) => [
		...deep(harmony, velocity),
		...bassLine(harmony, 40)
			.filter((_, i) => i % 2 === 1)
			.map(({ at, pitch }) => ({ at: at + 2, length: 0.8, pitch: pitch + 7, velocity: velocity * 0.6 })),
	];

	const first = score.melody(1, MELODY.A, { velocity: 0.72, hold: 0.93 });
	const again = score.melody(45, MELODY.A, { velocity: 0.9, hold: 0.93 });
	const landing = score.melody(17, MELODY.B, { velocity: 0.75, hold: 0.96 });
	const tide = score.melody(33, MELODY.C, { velocity: 0.78, hold: 0.98 });
	const feet = score.melody(41, MELODY.D, { velocity: 0.8, hold: 0.85 });
	const quay = score.melody(61, MELODY.E, { velocity: 0.95, hold: 0.9 });

	return [
		{
			name: "accordion",
			voice: (bus, note, random) => reed(bus, note, random),
			notes: [...first, ...feet, ...again, ...secondVoice(again, a2), ...quay, ...secondVoice(quay, e)],
			level: -20.5,
			place: -0.12,
			low: 180,
			bell: [[900, -1.5, 0.8]],
			room: 0.24,
			ride: [
				[1, -1],
				[41, -3],
				[44, -1],
				[45, 0],
			],
		},
		{
			name: "accordion left hand",
			voice: (bus, note, random) => reed(bus, note, random, { musette: 4, bright: 0.6 }),
			notes: [
				...pahPah(a1.slice(8), voiced(a1.slice(8)), 0.55),
				...pahPah(a2, voiced(a2), 0.6),
				...pahPah(dance, voiced(dance), 0.7),
				...heldChords(lastBar, voiced(lastBar, { voices: 4, low: 52, high: 72 }), { velocity: 0.75 }),
			],
			level: -26.5,
			place: 0.2,
			low: 160,
			room: 0.2,
		},
		{
			name: "guitar",
			voice: (bus, note, random) => pluck(bus, note, random, { ring: 1.6, hardness: 0.5, release: 0.12 }),
			notes: [
				...pahPah(a1, voiced(a1, { voices: 4, low: 52, high: 72 }), 0.62),
				...pahPah(b.slice(0, 14), voiced(b.slice(0, 14), { voices: 4, low: 52, high: 72 }), 0.5),
				...pahPah(a2, voiced(a2, { voices: 4, low: 52, high: 72 }), 0.7),
				...pahPah(dance, voiced(dance, { voices: 4, low: 52, high: 72 }), 0.8),
			],
			level: -23.5,
			place: 0.3,
			low: 140,
			bell: [[2800, 2, 0.8]],
			room: 0.2,
		},
		{
			name: "bass",
			voice: (bus, note, random) =>
				bass(bus, note, random, { last: 0.9, sustain: 0.15, bite: 450, edge: 0.55, release: 0.12 }),
			notes: [
				...oom(a1, 0.8),
				...oom(b.slice(0, 12), 0.75),
				...deep(b.slice(12), 0.7, 2.6),
				...deep(c, 0.7, 3.6),
				// In the run-up every beat is a step.
				...bassLine(d, 40).flatMap(({ at, pitch }, bar) =>
					[0, 1, 2, 3].map((n) => ({
						at: at + n,
						length: 0.8,
						pitch: pitch + (n % 2 === 1 && bar > 1 ? 12 : 0),
						velocity: 0.62 + 0.07 * bar,
					})),
				),
				...oom(a2, 0.9),
				...oom(dance, 0.95),
				...deep(lastBar, 1, 2.6),
			],
			level: -18.5,
			high: 2200,
			ride: [
				[1, 0],
				[33, -2],
				[41, -1],
				[45, 0],
			],
		},
		{
			name: "music box",
			voice: (bus, note, random) => chime(bus, note, random, { partials: "box", ring: 1.1, knock: 0.35 }),
			notes: [
				...up(
					landing.filter(({ at }) => at < score.beatOf(25)),
					12,
				),
				...up(
					landing.filter(({ at }) => at >= score.beatOf(29)),
					12,
				),
				...up(again, 12).map((note) => ({ ...note, velocity: note.velocity * 0.45 })),
				...[0, 1, 2].map((n) => ({ at: score.beatOf(68, n), length: 1, pitch: [88, 83, 76][n], velocity: 0.6 })),
			],
			level: -24,
			place: 0.15,
			low: 350,
			room: 0.36,
		},
		{
			name: "whistle",
			voice: (bus, note, random) => whistle(bus, note, random),
			notes: [
				...landing.filter(({ at }) => at >= score.beatOf(25)),
				...vary(quay, ({ pitch }) => ({ pitch: pitch + 12, velocity: 0.6 })),
			],
			level: -22.5,
			place: -0.2,
			low: 250,
			room: 0.34,
		},
		{
			name: "strings",
			voice: (bus, note, random) => saws(bus, note, random, STRINGS),
			notes: [
				...heldChords(b, voiced(b, { voices: 4, low: 52, high: 74 }), { velocity: 0.55 }),
				...heldChords(c, voiced(c, { voices: 4, low: 50, high: 72 }), { velocity: 0.65 }),
				...heldChords(d, voiced(d, { voices: 4, low: 52, high: 74 }), { velocity: 0.6 }),
				...heldChords(a2.slice(8), voiced(a2.slice(8), { voices: 4, low: 52, high: 76 }), { velocity: 0.6 }),
				...heldChords(e, voiced(e, { voices: 4, low: 52, high: 76 }), { velocity: 0.75 }),
			],
			level: -25,
			low: 170,
			room: 0.36,
			ride: [
				[16, -5],
				[25, -2],
				[33, 0],
				[41, -6],
				[44, 0],
				[53, -3],
				[61, -1],
			],
		},
		{
			name: "horn and cello",
			voice: (bus, note, random) => saws(bus, note, random, note.pitch < 65 ? CELLO : HORN),
			notes: [
				...up(
					tide.filter(({ at }) => at < score.beatOf(37)),
					-12,
				),
				...up(
					tide.filter(({ at }) => at >= score.beatOf(37)),
					-5 - 7,
				),
			],
			level: -22.5,
			place: -0.2,
			low: 110,
			room: 0.4,
		},
		{
			name: "violins",
			voice: (bus, note, random) => saws(bus, note, random, { ...CELLO, cents: [-8, -3, 2, 7], width: 0.7 }),
			notes: tide.filter(({ at }) => at >= score.beatOf(37)),
			level: -23,
			place: 0.15,
			low: 200,
			room: 0.4,
		},
		{
			name: "harp",
			voice: (bus, note, random) => pluck(bus, note, random, { ring: 3.2, hardness: 0.6, pick: 0.22 }),
			notes: [
				...broken(b.slice(14), voiced(b.slice(14), { voices: 4, low: 57, high: 76 }), bassLine(b.slice(14), 45), 0.6),
				...broken(c, voiced(c, { voices: 4, low: 57, high: 76 }), bassLine(c, 45), 0.7),
				...broken(d, voiced(d, { voices: 4, low: 57, high: 76 }), bassLine(d, 45), 0.65),
			],
			level: -22,
			place: 0.1,
			low: 100,
			room: 0.3,
		},
		...drums(score, beat),
	];
}

function drums(score, beat) {
	const hit = (bar, n, velocity) => ({ at: score.beatOf(bar, n), length: 1, pitch: 60, velocity });
	return [
		{
			name: "kick",
			voice: (bus, note, random) => kick(bus, note, random, { from: 130, to: 52, click: 0.3 }),
			notes: [
				...beat(1, 16, "7...........", 0.8),
				...beat(17, 12, "6...........", 0.7),
				...beat(33, 8, "6.......5.......", 0.8),
				...beat(41, 2, "6...5...6...5..."),
				...beat(43, 2, "7...6...7...7..."),
				...beat(45, 16, "9..........."),
				...beat(61, 7, "9..........."),
				hit(68, 0, 1),
			],
			level: -20,
			bell: [[350, -3, 0.9]],
		},
		{
			name: "brushes",
			voice: (bus, note, random) => snare(bus, note, random, { tune: 210, wires: 1.3, last: 0.07, bright: 4200 }),
			notes: [
				...beat(1, 8, "....3...3..."),
				...beat(9, 7, "....5...4..."),
				...beat(16, 1, "....5...5.6."),
				...beat(17, 12, "....3...3..."),
				...beat(45, 15, "....6...5..."),
				...beat(60, 1, "5.5.6.6.7.7."),
				...beat(61, 7, "3...7...7..."),
				// The run-up: one foot, the other foot, then both.
				...beat(41, 1, "2...3...2...3..."),
				...beat(42, 1, "3...4...3...4.3."),
				...beat(43, 1, "4.3.5.3.4.3.5.4."),
				...beat(44, 1, "5.5.6.6.77778888"),
			],
			level: -24.5,
			place: 0.1,
			low: 150,
			room: 0.18,
		},
		{
			name: "rim",
			voice: (bus, note, random) => rim(bus, note, random, { tune: 1900 }),
			notes: [...beat(1, 16, "5...3...3..."), ...beat(33, 8, "....4.......4...")],
			level: -31,
			place: -0.3,
			room: 0.3,
		},
		{
			name: "tambourine",
			voice: (bus, note, random) => shake(bus, note, random, { last: 0.06, bright: 8200, jingles: 1 }),
			notes: [...beat(45, 16, "3...6...5..."), ...beat(61, 7, "4.3.7.3.6.3.")],
			level: -33,
			place: -0.35,
			room: 0.2,
		},
		{
			name: "shaker",
			voice: shake,
			notes: [...beat(33, 8, "4.2.3.2.4.2.3.2."), ...beat(41, 4, "5.3.4.3.5.3.4.3.")],
			level: -37,
			place: 0.35,
			room: 0.1,
		},
		{
			name: "kettle drums",
			voice: (bus, note, random) => tom(bus, note, random, { last: 0.4, skin: 0.3 }),
			notes: [
				{ at: score.beatOf(44, 2), length: 1, pitch: 47, velocity: 0.7 },
				{ at: score.beatOf(44, 3), length: 1, pitch: 47, velocity: 0.85 },
				...[45, 53, 61].map((bar) => ({ at: score.beatOf(bar), length: 1, pitch: 40, velocity: 0.9 })),
				...[0, 1, 2].map((n) => ({ at: score.beatOf(67, n), length: 1, pitch: 47, velocity: 0.8 + 0.08 * n })),
				{ at: score.beatOf(68), length: 1, pitch: 40, velocity: 1 },
			],
			level: -25,
			room: 0.4,
		},
		{
			name: "quay drum",
			voice: quayDrum,
			notes: [hit(33, 0, 0.7), hit(37, 0, 0.6), hit(45, 0, 0.9), hit(61, 0, 0.9), hit(68, 0, 1)],
			level: -27,
			room: 0.4,
		},
		{
			name: "claps",
			voice: clap,
			// At the end the quay claps along, and after the last chord twice more.
			notes: [...beat(61, 7, "....7...6..."), hit(68, 1, 0.85), hit(68, 2, 0.85)],
			level: -29,
			place: 0.2,
			room: 0.3,
		},
		{
			name: "cymbal",
			voice: (bus, note, random) => cymbal(bus, note, random, { last: 0.6 }),
			notes: [hit(45, 0, 0.8), hit(53, 0, 0.5), hit(61, 0, 0.8), hit(68, 0, 0.9)],
			level: -31,
			place: -0.15,
			room: 0.25,
		},
		{
			name: "swell",
			voice: (bus, note, random) => riser(bus, note, random, { from: 900, to: 6000 }),
			notes: [{ at: score.beatOf(43), length: 8, pitch: 60, velocity: 0.8 }],
			level: -35,
			room: 0.3,
		},
	];
}
