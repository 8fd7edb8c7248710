/**
 * Music made by rules for the tests: chords, a bass, a wandering melody and drums, every bar its own, so that no two
 * places are the same. And what a music editor does to it, each edit with its truth.
 */
import type { Samples } from "../../../src/core/decode/index.ts";
import { createRandom } from "../../../src/core/maths/index.ts";

export const RATE = 22050;

export interface Made {
	readonly samples: Samples;
	/** Seconds. */
	readonly beats: readonly number[];
	readonly downbeats: readonly number[];
}

export const toSamples = (signal: Float32Array, sampleRate = RATE): Samples => ({
	sampleRate,
	channels: [signal],
	format: "wav",
	notes: [],
});

const SCALE = [0, 2, 3, 5, 7, 8, 10];

/** @param bars of four beats at 120 a minute: two seconds each */
export function makeMusic(seed: number, bars: number, beatSeconds = 0.5): Made {
	const random = createRandom(seed);
	const count = Math.round(bars * 4 * beatSeconds * RATE);
	const signal = new Float32Array(count);
	const add = (from: number, seconds: number, hertz: number, level: number): void => {
		const start = Math.round(from * RATE);
		const end = Math.min(count, start + Math.round(seconds * RATE));
		for (let i = start; i < end; i++) {
			const t = (i - start) / RATE;
			const shape = Math.min(1, t / 0.005) * Math.exp(-2.5 * t) * Math.min(1, (end - i) / 200);
			signal[i] += level * shape * (Math.sin(2 * Math.PI * hertz * t) + 0.4 * Math.sin(4 * Math.PI * hertz * t + 0.7));
		}
	};
	const hit = (from: number, level: number, decay: number, low: boolean): void => {
		const start = Math.round(from * RATE);
		let last = 0;
		for (let i = start; i < Math.min(count, start + 0.2 * RATE); i++) {
			const t = (i - start) / RATE;
			const noise = random.next() * 2 - 1;
			last = low ? Math.sin(2 * Math.PI * (50 * t + 2 * (1 - Math.exp(-40 * t)))) : 0.5 * last + noise;
			signal[i] += level * Math.exp(-t * decay) * last;
		}
	};
	const pitch = (step: number): number => 110 * 2 ** ((SCALE[((step % 7) + 7) % 7] + 12 * Math.floor(step / 7)) / 12);
	const beats: number[] = [];
	const downbeats: number[] = [];
	for (let bar = 0; bar < bars; bar++) {
		const root = random.below(7);
		const at = bar * 4 * beatSeconds;
		downbeats.push(at);
		for (const third of [0, 2, 4]) add(at, 4 * beatSeconds, 2 * pitch(root + third), 0.08);
		for (let beat = 0; beat < 4; beat++) {
			const time = at + beat * beatSeconds;
			beats.push(time);
			add(time, beatSeconds, pitch(root) / 2, 0.15);
			if (beat % 2 === 0 || random.next() < 0.2) hit(time, 0.3, 20, true);
			if (beat % 2 === 1) hit(time, 0.12, 25, false);
			for (let half = 0; half < 2; half++) {
				if (random.next() < 0.7) hit(time + (half * beatSeconds) / 2, 0.04, 80, false);
				if (random.next() < 0.6) add(time + (half * beatSeconds) / 2, beatSeconds, 4 * pitch(random.below(10)), 0.12);
			}
		}
	}
	return { samples: toSamples(signal), beats, downbeats };
}

/** A stretch of some samples in seconds. */
export function cutOut(samples: Samples, from: number, to: number): Float32Array {
	return samples.channels[0].slice(Math.round(from * samples.sampleRate), Math.round(to * samples.sampleRate));
}

/** Pieces one after another, with a fade of 5 ms out and in around each joint, as editors make. */
export function splice(pieces: readonly Float32Array[], fade = 0.005): Float32Array {
	const length = pieces.reduce((sum, piece) => sum + piece.length, 0);
	const out = new Float32Array(length);
	const ramp = Math.round(fade * RATE);
	let at = 0;
	pieces.forEach((piece, index) => {
		out.set(piece, at);
		for (let i = 0; i < ramp; i++) {
			if (index > 0) out[at + i] *= (i + 1) / (ramp + 1);
			if (index < pieces.length - 1) out[at + piece.length - 1 - i] *= (i + 1) / (ramp + 1);
		}
		at += piece.length;
	});
	return out;
}

/** Level, a low shelf, a high cut and soft clipping: what a new master does. */
export function remaster(signal: Float32Array): Float32Array {
	const out = new Float32Array(signal.length);
	let low = 0;
	let smooth = 0;
	for (let i = 0; i < signal.length; i++) {
		low += 0.03 * (signal[i] - low);
		smooth += 0.6 * (signal[i] + 0.6 * low - smooth);
		out[i] = 0.6 * Math.tanh(2.2 * smooth);
	}
	return out;
}

/**
 * Another tempo at the same pitch by overlap-add of similar waveforms (WSOLA, Verhelst and Roelands 1993).
 * @param factor new length over old
 */
export function stretchTime(signal: Float32Array, factor: number): Float32Array {
	const frame = 1024;
	const hop = frame / 2;
	const search = 200;
	const out = new Float32Array(Math.round(signal.length * factor));
	let expected = 0;
	for (let to = 0; to + frame < out.length; to += hop) {
		const wanted = Math.round(to / factor);
		let best = wanted;
		let bestScore = Number.NEGATIVE_INFINITY;
		for (let shift = -search; to > 0 && shift <= search; shift += 4) {
			const from = wanted + shift;
			if (from < 0 || from + frame >= signal.length || expected + frame >= signal.length) continue;
			let score = 0;
			for (let i = 0; i < frame; i += 8) score += signal[from + i] * signal[expected + i];
			if (score > bestScore) {
				bestScore = score;
				best = from;
			}
		}
		for (let i = 0; i < frame; i++) {
			out[to + i] += (0.5 - 0.5 * Math.cos((2 * Math.PI * i) / frame)) * (signal[best + i] ?? 0);
		}
		expected = best + hop;
	}
	return out;
}
