// "Lamps for the Returning Boats": the main piece. D major, 4/4 at 112.
// One call of five notes (A B D F♯ E) is everywhere: spelled by bells in A, turned upside down in the verse, sung out in
// the chorus, drawn out and then cut short in the hush, and let go note by note at the end.

import { arrangeLamps } from "./lamps-arrangement.mjs";
import { Score } from "./score.mjs";

const BPM = 112;
const part = (letter, name, bars) => ({ letter, name, stretches: [{ bars, beats: 4, bpm: BPM }] });

export const score = new Score({
	file: "lamps-for-the-returning-boats",
	title: "Lamps for the Returning Boats",
	start: 0.5,
	form: [
		part("A", "First lamps", 8),
		part("B", "The harbour wall", 8),
		part("A", "Lamps on the water", 8),
		part("C", "The boats come home", 12),
		part("B", "Names called over the water", 8),
		part("D", "Every lamp held still", 8),
		part("C", "The boats come home", 12),
		part("E", "Embers", 8),
	],
});

// Harmony of each letter, a bar between strokes.
export const HARMONY = {
	A: "Dadd9 | Dadd9/C# | Bm7 | Gmaj9 | D/F# | Gadd9 | Em9 | A7sus4 A7",
	B: "Bmadd9 | Bm/A | Gmaj7 | D/F# | Em7 | F#m7 | Gmaj9 | A7sus4 A7",
	C: "Gadd9 | A/G | F#m7 | Bm9 | Em9 | A7sus4 A | Dadd9 | D D7/C | G/B | Gm6/Bb | D/A | A7sus4 A7",
	D: "Bbmaj7 | F/A | Gm9 | A7sus4 | Bm7/A | G/A | Em9/A | A7sus4 A7",
	E: "Dadd9 | G/D | Gm6/D | Dadd9 | Bm7 | Gmaj7 | Gm6 | Dadd9",
};

// Melodies: lengths in eighths. The pick-up A4 B4 stands at the end of the part before.
export const MELODY = {
	A: "D5:3 F#5:1 E5:4 | r:6 A4:1 B4:1 | D5:3 E5:1 D5:4 | r:4 F#5:1 E5:1 D5:1 B4:1 | A4:3 D5:1 F#5:4 | r:2 E5:1 D5:1 B4:2 A4:2 | B4:3 D5:1 F#5:2 G5:2 | E5:4 r:2 A4:1 B4:1",
	B: "r:1 F#4:1 B4:1 C#5:1 D5:3 C#5:1 | B4:2 A4:1 F#4:3 r:2 | r:1 D4:1 G4:1 A4:1 B4:3 A4:1 | A4:2 F#4:1 D4:3 r:2 | r:1 E4:1 G4:1 B4:1 D5:3 B4:1 | C#5:2 B4:1 A4:3 r:1 A4:1 | B4:2 D5:2 F#5:3 E5:1 | D5:4 C#5:2 A4:1 B4:1",
	C: "D5:3 F#5:1 E5:2 D5:2 | E5:3 A4:1 A4:2 B4:2 | C#5:3 E5:1 D5:2 C#5:2 | D5:4 r:1 B4:1 D5:1 E5:1 | F#5:3 A5:1 G5:2 F#5:2 | E5:3 D5:1 E5:2 F#5:2 | A5:3 F#5:1 F#5:2 E5:2 | D5:4 r:2 A4:1 B4:1 | D5:3 F#5:1 E5:2 D5:2 | D5:3 E5:1 D5:2 Bb4:2 | A4:2 D5:2 F#5:3 E5:1 | D5:4 C#5:3 r:1",
	hush: "D5:6 F5:2 | E5:4 C5:4 | Bb4:6 D5:2 | D5:4 E5:4",
	run: "A4:1 B4:1 D5:1 A4:1 B4:1 D5:1 A4:1 B4:1 | B4:1 D5:1 E5:1 B4:1 D5:1 E5:1 B4:1 D5:1 | D5:1 E5:1 G5:1 D5:1 E5:1 G5:1 D5:1 E5:1 | E5:1 G5:1 A5:1 E5:1 G5:1 A5:1 r:2",
	embers: "D5:3 F#5:1 E5:4 | D5:3 B4:1 A4:4 | Bb4:3 D5:1 E5:4 | F#5:6 r:2",
	last: "r:2 F#5:1 E5:1 D5:4 | r:2 D5:1 B4:1 A4:4 | r:2 Bb4:1 D5:1 E5:4 | F#5:8",
	// Under the bells of the second A, and under the second verse.
	water: "A3:6 B3:2 | D4:6 C#4:2 | B3:4 A3:4 | B3:4 D4:4 | A3:6 F#3:2 | G3:4 B3:4 | E4:4 D4:2 B3:2 | D4:4 C#4:4",
	names:
		"F#3:4 B3:4 | r:2 D4:1 C#4:1 B3:2 A3:2 | B3:8 | r:2 D4:1 C#4:1 A3:4 | G3:4 B3:4 | r:2 E4:1 C#4:1 A3:4 | D4:4 B3:4 | D4:4 C#4:4",
};

/** Everything the desk needs. */
export function compose() {
	return {
		score,
		tracks: arrangeLamps(score, HARMONY, MELODY),
		room: { seconds: 2.6, damp: 4600, before: 0.02 },
		echoBeats: 0.75,
		duckOn: "kick",
		fader: [
			[8, 0],
			[9, -1.8],
			[16.5, -1.8],
			[17, -1.4],
			[24, -1],
			[25, 0],
			[36, 0],
			[37, -1.5],
			[44, -1.2],
			[45, 0],
			[53, 0.4],
			[64, 0.4],
			[65, 0],
		],
		tail: 3.6,
		mastering: { loudness: -15, ceiling: -2.7 },
	};
}
