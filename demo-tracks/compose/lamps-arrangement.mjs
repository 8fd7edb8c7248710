// Who plays what in "Lamps for the Returning Boats". Bars: A 1, B 9, A 17, C 25, B 37, D 45, C 53, E 65.

import { lampsDrums } from "./lamps-drums.mjs";
import { leadVoices } from "./pitch.mjs";
import { chime, pluck, tines } from "./plucked.mjs";
import { bassLine, heldChords, secondVoice, vary } from "./score.mjs";
import { bass, CELLO, choir, HORN, LEAD, STRINGS, saws, whistle } from "./sustained.mjs";

/** Arpeggio over voiced chords: `order` picks the voices (−1 the bass below them), one note every `step` beats. */
function arpeggio(harmony, voicings, roots, order, step, { velocity, hold = 2 }) {
	return harmony.flatMap(({ at, length }, i) => {
		const steps = Math.round(length / step);
		return Array.from({ length: steps }, (_, n) => {
			const voice = order[n % order.length];
			const pitch = voice < 0 ? roots[i].pitch : voicings[i][voice % voicings[i].length] + (voice > 3 ? 12 : 0);
			// On the beats plainly louder than between them: before the drums come in, the harp keeps the time.
			const accent = n === 0 ? 1.15 : (n * step) % 1 === 0 ? 1 : 0.68;
			return { at: at + n * step, length: hold, pitch, velocity: velocity * accent };
		});
	});
}

/** Bass of a full bar pattern: [[eighth, length in eighths, semitones above the bass note, velocity], …]. */
function bassPattern(harmony, around, pattern) {
	return bassLine(harmony, around).flatMap(({ at, length, pitch }, i, line) =>
		pattern
			.filter(([eighth]) => eighth / 2 < length)
			.map(([eighth, long, above, velocity]) => {
				// The last eighth of a bar leans towards the next bass note.
				const next = line[i + 1]?.pitch;
				const leads = above === "lead";
				const step = next === undefined || next === pitch ? 0 : Math.sign(next - pitch) * -1 + (next - pitch);
				return {
					at: at + eighth / 2,
					length: Math.min(long / 2, length - eighth / 2) * 0.94,
					pitch: leads ? pitch + (Math.abs(step) > 12 ? 0 : step) : pitch + above,
					velocity,
				};
			}),
	);
}

const VERSE_BASS = [
	[0, 3, 0, 0.85],
	[3, 1, 0, 0.6],
	[4, 2, 0, 0.75],
	[6, 1, 7, 0.6],
	[7, 1, "lead", 0.6],
];
const CHORUS_BASS = [
	[0, 1, 0, 1],
	[1, 1, 0, 0.7],
	[2, 1, 12, 0.8],
	[3, 1, 0, 0.75],
	[4, 1, 0, 0.95],
	[5, 1, 0, 0.7],
	[6, 1, 12, 0.8],
	[7, 1, 0, 0.75],
];

/** The tracks of the piece. */
export function arrangeLamps(score, HARMONY, MELODY) {
	const chords = {};
	for (const [letter, text] of Object.entries(HARMONY))
		chords[letter] = score.barsOf(letter).map((bar) => score.harmony(bar, text));
	const [a1, a2] = chords.A;
	const [b1, b2] = chords.B;
	const [c1, c2] = chords.C;
	const [d] = chords.D;
	const [e] = chords.E;
	const middle = { voices: 4, low: 52, high: 74 };
	const voiced = (harmony, range = middle) => leadVoices(harmony, range);
	const up = (notes, semitones) => vary(notes, ({ pitch }) => ({ pitch: pitch + semitones }));
	const pickUp = (bar, velocity) => [
		{ at: score.beatOf(bar, -1), length: 0.5, pitch: 69, velocity },
		{ at: score.beatOf(bar, -0.5), length: 0.5, pitch: 71, velocity },
	];
	const after = (harmony, bar) => harmony.filter(({ at }) => at >= score.beatOf(bar) - 1e-9);
	const cLines = [c1, c2].map((_, i) => score.melody(score.barsOf("C")[i], MELODY.C, { velocity: 0.9, hold: 0.96 }));

	const harpOrder = [-1, 0, 1, 2, 3, 2, 1, 2];
	const quickOrder = [-1, 0, 1, 2, 3, 4, 3, 2, 1, 2, 3, 5, 3, 2, 1, 0];
	const harp = (harmony, order, step, velocity, around = 45) =>
		arpeggio(harmony, voiced(harmony, { voices: 4, low: 57, high: 78 }), bassLine(harmony, around), order, step, {
			velocity,
		});
	// The last bar of the piece: the chord spelled out upwards, once, on the beats.
	const goodNight = [38, 45, 50, 54, 57, 62, 66, 69].map((pitch, i) => ({
		at: score.beatOf(72, i * 0.5),
		length: 6,
		pitch,
		velocity: 0.7 - 0.035 * i,
	}));

	return [
		...lampsDrums(score),
		{
			name: "bass",
			voice: (bus, note, random) => bass(bus, note, random, note.velocity > 0.65 ? {} : { bite: 500 }),
			notes: [
				...vary(bassLine(after(a1, 5), 40), () => ({ velocity: 0.6 })),
				...bassPattern(b1, 40, VERSE_BASS),
				...bassPattern(a2, 40, VERSE_BASS),
				...bassPattern(c1, 40, CHORUS_BASS),
				...bassPattern(b2, 40, VERSE_BASS),
				...vary(bassLine(d.slice(0, 4), 38), () => ({ velocity: 0.55 })),
				...[0, 1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12, 13].map((i) => ({
					at: score.beatOf(49, i),
					length: 0.85,
					pitch: 33,
					velocity: 0.5 + 0.03 * i,
				})),
				...bassPattern(c2, 40, CHORUS_BASS),
				...vary(bassLine(e.slice(0, 7), 38), () => ({ velocity: 0.65 })),
				{ at: score.beatOf(72), length: 5, pitch: 38, velocity: 0.7 },
			],
			level: -18,
			high: 2600,
			duck: 0.35,
			ride: [
				[1, -3],
				[9, -1],
				[17, -1],
				[24, 0],
				[36, 0],
				[37, -1],
				[45, -3],
				[52, 0],
				[64, 0],
				[65, -2],
				[72, -4],
			],
		},
		{
			name: "harp",
			voice: (bus, note, random) => pluck(bus, note, random, { ring: 3.4, hardness: 0.62, pick: 0.21 }),
			notes: [
				...harp(a1.slice(0, 3), harpOrder, 0.5, 0.62),
				...harp(a1.slice(3, 4), quickOrder, 0.25, 0.58),
				...harp(a1.slice(4), harpOrder, 0.5, 0.68),
				...harp(a2, quickOrder, 0.25, 0.66),
				...harp(b1, [-1, 1, 2, 3], 1, 0.5),
				...harp(c1, quickOrder, 0.25, 0.8),
				...harp(b2, harpOrder, 0.5, 0.55),
				...harp(d.slice(0, 4), [-1, 2, 3, 2], 1, 0.5),
				...harp(d.slice(4, 8), harpOrder, 0.5, 0.6, 48),
				...harp(c2, quickOrder, 0.25, 0.85),
				...harp(e.slice(0, 4), harpOrder, 0.5, 0.7),
				...harp(e.slice(4, 7), harpOrder, 0.5, 0.55),
				...goodNight,
			],
			level: -23.5,
			low: 90,
			bell: [
				[240, -2.5, 0.8],
				[3400, 3, 0.7],
			],
			room: 0.3,
			echo: 0.12,
			ride: [
				[1, 0],
				[9, -2],
				[17, 0],
				[25, -1],
				[37, -3],
				[45, 0],
				[53, -1],
				[65, 0],
			],
		},
		{
			name: "bells",
			voice: (bus, note, random) => chime(bus, note, random, { partials: "bar", ring: 1.1 }),
			notes: [
				...up(score.melody(1, MELODY.A, { velocity: 0.62 }), 12),
				...up(score.melody(17, MELODY.A, { velocity: 0.72 }), 12),
				...up(score.melody(45, MELODY.hush, { velocity: 0.66 }), 12),
				...up(score.melody(49, MELODY.run, { velocity: 0.5 }), 12),
				...up(cLines[1], 12).map((note) => ({ ...note, velocity: note.velocity * 0.55 })),
				...up(score.melody(69, MELODY.last, { velocity: 0.6 }), 12),
			],
			level: -25,
			place: 0.22,
			low: 400,
			high: 11000,
			room: 0.42,
			echo: 0.3,
			ride: [
				[1, 0],
				[48, 0],
				[49, -5],
				[52, 0],
				[53, -2],
				[64, -2],
				[65, 1],
			],
		},
		{
			name: "ship bell",
			voice: (bus, note, random) => chime(bus, note, random, { partials: "bell", ring: 1 }),
			notes: [1, 17, 25, 45, 53, 65, 72].map((bar) => ({
				at: score.beatOf(bar),
				length: 4,
				pitch: 62,
				velocity: bar === 45 ? 0.9 : 0.7,
			})),
			level: -29,
			place: -0.35,
			low: 150,
			room: 0.6,
		},
		{
			name: "keys",
			voice: (bus, note, random) => tines(bus, note, random, { bright: 0.8 }),
			notes: [
				...compKeys(b1, voiced(b1), 0.6),
				...compKeys(b2, voiced(b2), 0.64),
				...heldChords(d.slice(0, 4), voiced(d.slice(0, 4)), { velocity: 0.62, tie: false }),
			],
			level: -25,
			place: -0.25,
			low: 130,
			room: 0.3,
			echo: 0.1,
		},
		{
			name: "strings",
			voice: (bus, note, random) => saws(bus, note, random, STRINGS),
			notes: [
				...heldChords(after(a1, 5), voiced(after(a1, 5)), { velocity: 0.5 }),
				...heldChords(a2, voiced(a2), { velocity: 0.6 }),
				...heldChords(c1, voiced(c1, { voices: 5, low: 50, high: 79 }), { velocity: 0.8 }),
				...heldChords(b2, voiced(b2), { velocity: 0.55 }),
				...heldChords(d, voiced(d), { velocity: 0.6 }),
				...heldChords(c2, voiced(c2, { voices: 5, low: 50, high: 81 }), { velocity: 0.85 }),
				...heldChords(e, voiced(e), { velocity: 0.6 }),
			],
			level: -26,
			low: 160,
			bell: [
				[320, -2.5, 0.9],
				[2200, 2, 0.7],
			],
			room: 0.4,
			duck: 0.3,
			ride: [
				[4, -9],
				[9, -4],
				[17, -3],
				[25, 0],
				[36, 0],
				[37, -3],
				[45, -4],
				[49, -7],
				[52.9, 1],
				[64, 0],
				[65, -2],
				[69, -4],
				[72, -7],
				[73, -14],
			],
		},
		{
			name: "cello",
			voice: (bus, note, random) => saws(bus, note, random, CELLO),
			notes: [
				...score.melody(17, MELODY.water, { velocity: 0.7 }),
				...score.melody(37, MELODY.names, { velocity: 0.75 }),
			],
			level: -26,
			place: 0.3,
			low: 110,
			room: 0.35,
		},
		{
			name: "whistle",
			voice: (bus, note, random) => whistle(bus, note, random),
			notes: [
				...score.melody(9, MELODY.B, { velocity: 0.75, hold: 0.94 }),
				...score.melody(37, MELODY.B, { velocity: 0.85, hold: 0.94 }),
				...score.melody(65, MELODY.embers, { velocity: 0.7, hold: 0.96 }),
			],
			level: -22,
			place: -0.08,
			low: 200,
			room: 0.36,
			echo: 0.16,
		},
		{
			name: "lead",
			voice: (bus, note, random) => saws(bus, note, random, LEAD),
			notes: [...pickUp(25, 0.75), ...cLines[0], ...pickUp(53, 0.85), ...cLines[1]],
			level: -21.5,
			low: 180,
			high: 9000,
			bell: [[1800, 2, 0.8]],
			room: 0.24,
			echo: 0.16,
		},
		{
			name: "horns",
			voice: (bus, note, random) => saws(bus, note, random, HORN),
			notes: [
				...up(cLines[0], -12),
				...up(cLines[1], -12),
				...secondVoice(cLines[1], c2),
				...heldChords(d.slice(4), voiced(d.slice(4), { voices: 3, low: 50, high: 67 }), { velocity: 0.5 }),
			],
			level: -24.5,
			place: -0.15,
			low: 120,
			bell: [[420, -1.5, 0.8]],
			room: 0.32,
			ride: [
				[1, 0],
				[48.9, 0],
				[49, -8],
				[52.9, 1],
				[53, 0],
			],
		},
		{
			name: "choir",
			voice: (bus, note, random) => choir(bus, note, random),
			notes: [
				...heldChords(c1, voiced(c1, { voices: 4, low: 55, high: 77 }), { velocity: 0.7 }),
				...heldChords(d.slice(4), voiced(d.slice(4), { voices: 4, low: 55, high: 77 }), { velocity: 0.6 }),
				...heldChords(c2, voiced(c2, { voices: 4, low: 55, high: 79 }), { velocity: 0.85 }),
				...heldChords(e.slice(0, 4), voiced(e.slice(0, 4)), { velocity: 0.5 }),
			],
			level: -26,
			low: 220,
			room: 0.5,
			duck: 0.15,
			ride: [
				[1, 0],
				[36, 0],
				[49, -9],
				[52.9, 0],
				[64, 0],
				[65, -5],
				[69, -9],
			],
		},
	];
}

/** Off-beat electric piano: chord short on the "and" of 2, longer on 4, with a soft touch on 1. */
function compKeys(harmony, voicings, velocity) {
	return harmony.flatMap(({ at, length }, i) => {
		const strokes =
			length > 2
				? [
						[0, 1.4, 0.85],
						[1.5, 1.2, 1],
						[3, 0.9, 0.9],
					]
				: [
						[0, 1.2, 0.9],
						[1.5, 0.5, 0.8],
					];
		return strokes.flatMap(([offset, long, weight]) =>
			voicings[i].map((pitch) => ({ at: at + offset, length: long, pitch, velocity: velocity * weight })),
		);
	});
}
