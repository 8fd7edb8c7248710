// The mixing desk: each track is played, put through its channel, balanced by the meter and summed.

import { integratedLoudness } from "./loudness.mjs";
import { seeded, seedOf } from "./random.mjs";
import { echo, reverberate } from "./room.mjs";
import { cutAbove, cutBelow, panGains, RATE, raise } from "./sound.mjs";

/**
 * Mixes a piece to { left, right } (before mastering); `fader` rides the whole as a track's `ride` rides the track.
 * A track: { name, voice(bus, note, random), notes, level (LUFS of the track where it plays), place −1..1, low and high
 * cut in Hz, bell [[Hz, dB, q]], room and echo (gain of the sends, dry = 1), duck 0..1, ride [[bar, dB], …] }.
 */
export function mix({ score, tracks, room, echoBeats, duckOn, fader = [], tail, report = () => {} }) {
	const length = Math.ceil((score.secondsAt(score.beats) + tail) * RATE);
	const bus = () => ({ left: new Float32Array(length), right: new Float32Array(length) });
	const dry = bus();
	const toRoom = bus();
	const toEcho = bus();
	const scratch = bus();
	const dip = duckOn ? duckCurve(score, tracks.find(({ name }) => name === duckOn).notes, length) : null;
	for (const track of tracks) {
		const random = seeded(seedOf(`${score.file}/${track.name}`));
		for (const note of track.notes) {
			const time = score.secondsAt(note.at);
			const duration = score.secondsAt(note.at + note.length) - time;
			track.voice(scratch, { ...note, time: time + (note.late ?? 0), duration }, random);
		}
		const spans = soundingSpans(scratch);
		channel(scratch, track, spans);
		const gain = 10 ** ((track.level - integratedLoudness(scratch.left, scratch.right, spans)) / 20);
		ride(scratch, score, track.ride ?? [], gain, spans);
		if (dip && track.duck) duck(scratch, dip, track.duck, spans);
		add(dry, scratch, 1, spans);
		add(toRoom, scratch, track.room ?? 0, spans);
		add(toEcho, scratch, track.echo ?? 0, spans);
		for (const [from, to] of spans) {
			scratch.left.fill(0, from, to);
			scratch.right.fill(0, from, to);
		}
		report(`${track.name}: ${track.notes.length} notes`);
	}
	if (echoBeats) {
		const seconds = score.secondsAt(echoBeats) - score.start;
		const echoes = echo(toEcho.left, toEcho.right, { seconds });
		add(dry, echoes, 1);
		add(toRoom, echoes, 0.3);
	}
	const wet = reverberate(toRoom.left, toRoom.right, { ...room, seed: seedOf(score.file) });
	add(dry, wet, 1);
	ride(dry, score, fader, 1, [[0, length]]);
	return dry;
}

/** Stretches [from, to) of samples in which anything sounds, with half a second for filters to ring out. */
function soundingSpans({ left, right }) {
	const block = 4410;
	const spans = [];
	for (let from = 0; from < left.length; from += block) {
		const to = Math.min(left.length, from + block);
		let sounds = false;
		for (let i = from; i < to && !sounds; i++) sounds = left[i] !== 0 || right[i] !== 0;
		if (!sounds) continue;
		const end = Math.min(left.length, to + 5 * block);
		const last = spans.at(-1);
		if (last && from <= last[1]) last[1] = end;
		else spans.push([from, end]);
	}
	return spans;
}

function add(onto, what, gain, spans = [[0, onto.left.length]]) {
	if (gain === 0) return;
	for (const [from, to] of spans) {
		for (let i = from; i < to; i++) {
			onto.left[i] += gain * what.left[i];
			onto.right[i] += gain * what.right[i];
		}
	}
}

/** Cuts, bells and place of one channel. */
function channel(bus, { low, high, bell = [], place = 0 }, spans) {
	const [toLeft, toRight] = panGains(place);
	for (const [from, to] of spans) {
		for (const side of [bus.left, bus.right]) {
			const samples = side.subarray(from, to);
			if (low) cutBelow(samples, low);
			if (high) cutAbove(samples, high);
			for (const [frequency, decibels, q] of bell) raise(samples, frequency, decibels, q);
			const gain = side === bus.left ? toLeft : toRight;
			if (place !== 0) for (let i = 0; i < samples.length; i++) samples[i] *= gain;
		}
	}
}

/** Rides the fader: decibels between the given bars follow a straight line, level before the first and past the last. */
function ride(bus, score, points, gain, spans) {
	const knots = points.map(([bar, decibels]) => {
		const whole = Math.floor(bar);
		const beats = score.beatOf(whole + 1) - score.beatOf(whole);
		return [score.secondsAt(score.beatOf(whole, (bar - whole) * beats)) * RATE, decibels];
	});
	const levelAt = (i) => {
		if (knots.length === 0) return 0;
		let next = knots.findIndex(([at]) => at > i);
		if (next < 0) next = knots.length;
		const [fromAt, from] = knots[Math.max(0, next - 1)];
		const [toAt, to] = knots[Math.min(knots.length - 1, next)];
		const way = toAt > fromAt ? Math.min(1, Math.max(0, (i - fromAt) / (toAt - fromAt))) : 1;
		return from + (to - from) * way;
	};
	// Steps of 64 samples, each fader position reached along a straight line.
	for (const [from, to] of spans) {
		let now = gain * 10 ** (levelAt(from) / 20);
		for (let start = from; start < to; start += 64) {
			const end = Math.min(to, start + 64);
			const then = gain * 10 ** (levelAt(end) / 20);
			const step = (then - now) / (end - start);
			for (let i = start; i < end; i++) {
				bus.left[i] *= now;
				bus.right[i] *= now;
				now += step;
			}
			now = then;
		}
	}
}

/** 1 at every stroke of the drum, falling off until the next: how far the others make way. */
function duckCurve(score, strokes, length) {
	const curve = new Float32Array(length);
	const rise = Math.round(0.003 * RATE);
	for (const { at, velocity } of strokes) {
		const first = Math.round(score.secondsAt(at) * RATE);
		for (let i = -rise; i < 0.45 * RATE && first + i < length; i++) {
			if (first + i < 0) continue;
			const shape = i < 0 ? 1 + i / rise : Math.exp(-i / (0.11 * RATE));
			curve[first + i] = Math.max(curve[first + i], shape * Math.min(1, velocity * 1.1));
		}
	}
	return curve;
}

function duck(bus, dip, depth, spans) {
	for (const [from, to] of spans) {
		for (let i = from; i < to; i++) {
			const gain = 1 - depth * dip[i];
			bus.left[i] *= gain;
			bus.right[i] *= gain;
		}
	}
}
