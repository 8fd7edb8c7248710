// "The Keeper Comes Down Dancing": a waltz that loses its breath, a slow tide in four, a run-up, and the waltz again,
// faster and faster. E minor, G major, C major.

import { arrangeKeeper } from "./keeper-arrangement.mjs";
import { Score } from "./score.mjs";

export const score = new Score({
	file: "the-keeper-comes-down-dancing",
	title: "The Keeper Comes Down Dancing",
	start: 0.6,
	form: [
		{ letter: "A", name: "Down the stairs", stretches: [{ bars: 16, beats: 3, bpm: 132 }] },
		{
			letter: "B",
			name: "The window on the landing",
			stretches: [
				{ bars: 12, beats: 3, bpm: 132 },
				{ bars: 4, beats: 3, bpm: 132, to: 84 },
			],
		},
		{ letter: "C", name: "The tide turns", stretches: [{ bars: 8, beats: 4, bpm: 96 }] },
		{ letter: "D", name: "One foot, the other foot", stretches: [{ bars: 4, beats: 4, bpm: 96, to: 132 }] },
		{ letter: "A", name: "Down the stairs", stretches: [{ bars: 16, beats: 3, bpm: 132 }] },
		{ letter: "E", name: "Out on the quay", stretches: [{ bars: 8, beats: 3, bpm: 132, to: 176 }] },
	],
});

export const HARMONY = {
	A: "Em | Em/D | Am/C | B7 | Em | Em/D | C | B7 | Am | D7 | G | C | F#m7b5 | B7 | Em | B7",
	B: "G | D/F# | Em | Bm | C | G/B | Am7 | D7 | G | D/F# | Em | Bm | C | Cm6 | G/D | D7",
	C: "C | G/B | Am7 | Em/G | F | C/E | Dm7 | G7sus4 G7",
	D: "Am | Am/G | F#m7b5 | B7",
	E: "Em | Em/D | C | B7 | Em | Am/C | B7 | Em",
};

export const MELODY = {
	A: "B4:3 C5:1 B4:2 | G4:4 E4:2 | A4:3 B4:1 A4:2 | F#4:4 D#4:2 | E4:2 G4:2 B4:2 | E5:4 D5:2 | C5:3 B4:1 C5:2 | B4:6 | C5:3 D5:1 C5:2 | F#4:2 A4:2 C5:2 | B4:3 C5:1 B4:2 | G4:4 E4:2 | A4:2 C5:2 E5:2 | D#5:3 E5:1 F#5:2 | E5:4 B4:2 | B4:4 r:2",
	B: "D5:2 G5:2 F#5:2 | F#5:4 E5:1 D5:1 | E5:2 G5:2 E5:2 | D5:6 | C5:2 E5:2 D5:2 | D5:4 B4:2 | C5:2 B4:2 A4:2 | A4:4 D5:2 | D5:2 G5:2 A5:2 | A5:4 F#5:2 | G5:2 F#5:2 E5:2 | F#5:3 E5:1 D5:2 | E5:4 G5:2 | Eb5:4 G5:2 | D5:6 | C5:2 B4:2 A4:2",
	C: "E5:3 F5:1 E5:4 | D5:4 B4:2 G4:2 | C5:3 D5:1 C5:4 | B4:4 G4:4 | A4:2 C5:2 F5:4 | E5:3 D5:1 C5:4 | D5:2 F5:2 A5:3 G5:1 | G5:4 F5:2 D5:2",
	D: "A4:1 B4:1 C5:1 A4:1 B4:1 C5:1 D5:1 B4:1 | C5:1 D5:1 E5:1 C5:1 D5:1 E5:1 F#5:1 D5:1 | E5:1 F#5:1 G5:1 E5:1 F#5:1 G5:1 A5:1 F#5:1 | F#5:2 D#5:2 B4:2 A4:2",
	E: "B4:1 C5:1 B4:1 A4:1 G4:1 F#4:1 | E4:1 F#4:1 G4:1 A4:1 B4:1 D5:1 | C5:1 B4:1 C5:1 D5:1 E5:1 G5:1 | F#5:2 D#5:2 B4:2 | E5:1 D5:1 B4:1 G4:1 B4:1 E5:1 | C5:1 E5:1 A5:1 G5:1 F#5:1 E5:1 | D#5:2 F#5:2 B5:2 | E5:6",
};

/** Everything the desk needs. */
export function compose() {
	return {
		score,
		tracks: arrangeKeeper(score, HARMONY, MELODY),
		room: { seconds: 1.9, damp: 4200, before: 0.014 },
		fader: [
			[1, -1.5],
			[9, -0.5],
			[17, -1],
			[28, -1],
			[32, -3],
			[33, -2.5],
			[40, 0],
			[41, -1],
			[45, 0.5],
			[61, 1.2],
		],
		tail: 2.6,
		mastering: { loudness: -15.5, ceiling: -2.6 },
	};
}
