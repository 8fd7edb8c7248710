import { createRandom } from "../../src/core/maths/index.ts";
import { writeWav } from "../cli/make-track.ts";

/** A soundtrack made for the tests: its beats are known, and it is not the demo. */
export interface MadeTrack {
	readonly wav: Uint8Array;
	readonly beats: readonly number[];
	readonly duration: number;
}

const RATE = 44100;
const CHORDS = [
	[45, 60, 64, 69],
	[41, 57, 60, 65],
	[48, 60, 64, 67],
	[43, 59, 62, 67],
];

/**
 * Bars of four at `bpm` with drums, bass and chords; every eight bars the arrangement changes, so that there are
 * sections to find.
 */
export function makeTrack(bpm: number, bars: number, seed = 1): MadeTrack {
	const random = createRandom(seed);
	const beat = 60 / bpm;
	const lead = 0.4;
	const duration = lead + bars * 4 * beat + 1.5;
	const sound = new Float32Array(Math.round(duration * RATE));
	const add = (time: number, length: number, sample: (t: number) => number) => {
		const start = Math.round(time * RATE);
		for (let i = 0; i < length * RATE && start + i < sound.length; i++) sound[start + i] += sample(i / RATE);
	};
	const tone = (pitch: number) => 440 * 2 ** ((pitch - 69) / 12);
	const beats: number[] = [];
	for (let bar = 0; bar < bars; bar++) {
		const part = Math.floor(bar / 8) % 3;
		const chord = CHORDS[(bar + part) % 4];
		for (let step = 0; step < 4; step++) {
			const at = lead + (bar * 4 + step) * beat;
			beats.push(at);
			if (part > 0 || bar >= 4) {
				if (step % 2 === 0)
					add(
						at,
						0.25,
						(t) => 0.7 * Math.sin(2 * Math.PI * (48 * t + 14 * (1 - Math.exp(-t * 30)))) * Math.exp(-t * 14),
					);
				else add(at, 0.2, (t) => 0.35 * (2 * random.next() - 1) * Math.exp(-t * 22));
			}
			for (const half of [0, 0.5])
				add(at + half * beat, 0.05, (t) => (part === 2 ? 0.16 : 0.08) * (2 * random.next() - 1) * Math.exp(-t * 90));
			add(at, beat * 0.9, (t) => 0.25 * Math.sin(2 * Math.PI * tone(chord[0] - 12) * t) * Math.exp(-t * 3));
			if (part === 2)
				add(
					at,
					0.3,
					(t) => 0.12 * Math.sign(Math.sin(2 * Math.PI * tone(chord[1 + (step % 3)] + 12) * t)) * Math.exp(-t * 9),
				);
		}
		for (const pitch of chord.slice(1))
			add(
				lead + bar * 4 * beat,
				4 * beat,
				(t) => 0.07 * Math.sin(2 * Math.PI * tone(pitch) * t) * Math.min(1, t * 30) * Math.exp(-t * 0.6),
			);
	}
	return { wav: writeWav([sound.map((value) => 0.7 * value)], RATE), beats, duration };
}
