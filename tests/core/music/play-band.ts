/**
 * A small band for the tests: drums, bass and chords at known times, made of sines and seeded noise. Imports nothing of
 * src, so that what it plays is the truth that the analysis is held against.
 */
export interface Part {
	readonly bars: number;
	readonly beatsPerBar: number;
	readonly bpm: number;
	/** Which of the chord rows is played: other music, other letter. */
	readonly song: number;
	/** 0 silent … 1 everything. */
	readonly fullness: number;
}

export interface Performance {
	readonly samples: Float32Array;
	readonly beats: number[];
	readonly downbeats: number[];
	/** Start of each part, seconds. */
	readonly starts: number[];
}

/** Root notes (MIDI) of the chords, one a bar. */
const SONGS = [
	[48, 45, 53, 55],
	[50, 57, 46, 52],
	[52, 48, 55, 50],
];

function noiseSource(seed: number): () => number {
	let state = seed >>> 0;
	return () => {
		state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0;
		return state / 2_147_483_648 - 1;
	};
}

export function playBand(parts: readonly Part[], rate = 44_100, leadIn = 0.4): Performance {
	const beats: number[] = [];
	const downbeats: number[] = [];
	const starts: number[] = [];
	const events: { at: number; play: (t: number) => number; length: number }[] = [];
	const noise = noiseSource(7);
	const hz = (note: number) => 440 * 2 ** ((note - 69) / 12);
	let at = leadIn;
	for (const part of parts) {
		const beat = 60 / part.bpm;
		starts.push(at);
		for (let bar = 0; bar < part.bars; bar++) {
			const root = SONGS[part.song][bar % 4];
			for (let k = 0; k < part.beatsPerBar; k++, at += beat) {
				beats.push(at);
				if (k === 0) downbeats.push(at);
				if (part.fullness === 0) continue;
				const kick = k === 0 || (part.beatsPerBar === 4 && k === 2);
				if (kick) {
					events.push({
						at,
						length: 0.2,
						play: (t) =>
							0.6 * part.fullness * Math.exp(-t * 18) * Math.sin(2 * Math.PI * (50 * t + 4 * (1 - Math.exp(-t * 30)))),
					});
				} else {
					events.push({ at, length: 0.15, play: (t) => 0.3 * part.fullness * Math.exp(-t * 25) * noise() });
				}
				for (const half of [0, beat / 2]) {
					events.push({ at: at + half, length: 0.05, play: (t) => 0.08 * part.fullness * Math.exp(-t * 90) * noise() });
				}
				const bass = hz(root - 12);
				events.push({
					at,
					length: beat * 0.9,
					play: (t) => 0.25 * part.fullness * Math.exp(-t * 4) * Math.sin(2 * Math.PI * bass * t),
				});
				if (k !== 0) continue;
				for (const step of [0, part.song === 1 ? 3 : 4, 7]) {
					const pitch = hz(root + 12 + step);
					events.push({
						at,
						length: beat * part.beatsPerBar,
						play: (t) => {
							const swell = Math.min(1, t * 60) * Math.exp(-t * 0.8);
							return 0.09 * swell * (Math.sin(2 * Math.PI * pitch * t) + 0.4 * Math.sin(4 * Math.PI * pitch * t));
						},
					});
				}
			}
		}
	}
	const samples = new Float32Array(Math.ceil((at + 1) * rate));
	for (const event of events) {
		const first = Math.ceil(event.at * rate);
		const last = Math.min(samples.length, Math.ceil((event.at + event.length) * rate));
		for (let i = first; i < last; i++) samples[i] += event.play(i / rate - event.at);
	}
	return { samples, beats, downbeats, starts };
}

/** White noise, seeded. */
export function playNoise(seconds: number, rate: number, level = 0.3): Float32Array {
	const noise = noiseSource(3);
	return Float32Array.from({ length: Math.round(seconds * rate) }, () => level * noise());
}

/** Noise in syllables of uneven length through a wandering resonance: no speech, but as unmusical. */
export function playMumble(seconds: number, rate: number): Float32Array {
	const noise = noiseSource(11);
	const samples = new Float32Array(Math.round(seconds * rate));
	let [y1, y2] = [0, 0];
	for (let at = 0; at < samples.length; ) {
		const length = Math.round(rate * (0.08 + 0.12 * (noise() + 1)));
		const pause = Math.round(rate * (0.03 + 0.1 * (noise() + 1) ** 3));
		const angle = (2 * Math.PI * (500 + 350 * noise())) / rate;
		for (let i = 0; i < length && at + i < samples.length; i++) {
			const y = 0.05 * noise() + 1.9 * Math.cos(angle) * y1 - 0.92 * y2;
			[y2, y1] = [y1, y];
			samples[at + i] = 0.2 * y * Math.sin((Math.PI * i) / length);
		}
		at += length + pause;
	}
	return samples;
}
