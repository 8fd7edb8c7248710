// Struck and plucked instruments: all of them speak on the first sample of their note.

import { hertz } from "./pitch.mjs";
import { Envelope, Filter, panGains, placeOn, RATE } from "./sound.mjs";

/**
 * One string by Karplus & Strong (1983) with the extensions of Jaffe & Smith (1983): pick position, loudness by
 * low-pass of the pluck, a decay in seconds, and an all-pass for the fraction of a sample that tunes it.
 */
function ringString(out, first, samples, frequency, { ring, dull, hardness, pick }, gain, random) {
	const period = RATE / frequency;
	const damping = 0.5 * dull;
	let whole = Math.floor(period - damping);
	let fraction = period - damping - whole;
	if (fraction < 0.1) {
		whole -= 1;
		fraction += 1;
	}
	const allpass = (1 - fraction) / (1 + fraction);
	const keep = 10 ** (-3 / (frequency * ring));
	const line = new Float32Array(whole);
	const tone = new Filter(Math.min(16000, frequency * (2 + 14 * hardness)), 0.6);
	let mean = 0;
	for (let i = 0; i < whole; i++) {
		line[i] = tone.run(2 * random() - 1);
		mean += line[i] / whole;
	}
	const offset = Math.max(1, Math.round(pick * whole));
	const pluckShape = line.slice();
	let power = 0;
	for (let i = 0; i < whole; i++) {
		line[i] = pluckShape[i] - mean - 0.9 * (pluckShape[(i + whole - offset) % whole] - mean);
		power += line[i] * line[i];
	}
	const level = gain / Math.sqrt(power / whole + 1e-9);
	let at = 0;
	let earlier = 0;
	let passIn = 0;
	let passOut = 0;
	for (let i = 0; i < samples; i++) {
		const value = line[at];
		out[first + i] += value * level;
		const damped = keep * ((1 - damping) * value + damping * earlier);
		earlier = value;
		passOut = allpass * (damped - passOut) + passIn;
		passIn = damped;
		line[at] = passOut;
		at = at + 1 === whole ? 0 : at + 1;
	}
}

/** Harp, guitar or pizzicato: two strings a hair apart, one to each side. Ring is seconds to −60 dB at A3. */
export function pluck(bus, note, random, options = {}) {
	const { ring = 4, dull = 0.5, pick = 0.17, spread = 1.2, hardness = 0.5, release = 0.25 } = options;
	const length = note.duration + release;
	const [first, samples] = placeOn(bus, note.time, Math.round(Math.min(length, ring * 1.5) * RATE));
	const [toLeft, toRight] = panGains(note.place ?? 0);
	const shape = {
		ring: ring * (220 / hertz(note.pitch)) ** 0.45,
		dull,
		pick,
		hardness: hardness * (0.35 + 0.65 * note.velocity),
	};
	const gain = 0.16 * note.velocity ** 1.4;
	const sides = [
		[bus.left, toLeft, -spread],
		[bus.right, toRight, spread],
	];
	for (const [side, pan, cents] of sides) {
		const own = new Float32Array(samples);
		ringString(own, 0, samples, hertz(note.pitch + cents / 100), shape, gain * pan, random);
		fadeOut(own, Math.round(release * RATE));
		for (let i = 0; i < samples; i++) side[first + i] += own[i];
	}
}

function fadeOut(samples, length) {
	const from = Math.max(0, samples.length - length);
	for (let i = from; i < samples.length; i++) {
		const left = (samples.length - i) / (samples.length - from);
		samples[i] *= left * left;
	}
}

// Frequency over the fundamental, loudness, seconds to −60 dB. Bar: the free bar of a glockenspiel.
// Bell: hum, prime, tierce, quint, nominal and upper partials of a cast bell.
const PARTIALS = {
	bar: [
		[1, 1, 2.6],
		[2.756, 0.42, 1.1],
		[5.404, 0.2, 0.5],
		[8.933, 0.08, 0.22],
	],
	box: [
		[1, 1, 1.8],
		[2.0, 0.12, 1.2],
		[4.03, 0.34, 0.7],
		[6.8, 0.1, 0.3],
	],
	bell: [
		[0.5, 0.5, 7],
		[1, 0.8, 5],
		[1.183, 0.6, 4],
		[1.506, 0.25, 3],
		[2, 0.9, 3.4],
		[2.514, 0.25, 2],
		[2.662, 0.3, 1.8],
		[3.011, 0.3, 1.4],
		[4.166, 0.2, 0.9],
	],
};

/** Bars and bells: sines that die away each at its own pace, and the knock of the mallet. */
export function chime(bus, note, random, { partials = "bar", ring = 1, knock = 0.25 } = {}) {
	const [toLeft, toRight] = panGains(note.place ?? 0);
	const base = hertz(note.pitch);
	for (const [ratio, loud, seconds] of PARTIALS[partials]) {
		const frequency = base * ratio;
		if (frequency > 18000) continue;
		const last = seconds * ring * (660 / base) ** 0.3;
		const [first, samples] = placeOn(bus, note.time, Math.round(last * RATE));
		const fall = 10 ** (-3 / (last * RATE));
		const turn = 2 * Math.cos((2 * Math.PI * frequency) / RATE);
		// High partials answer to a harder stroke.
		let level = 0.14 * loud * note.velocity ** (1 + 0.25 * Math.min(ratio, 5));
		let now = 0;
		let before = -Math.sin((2 * Math.PI * frequency) / RATE);
		for (let i = 0; i < samples; i++) {
			bus.left[first + i] += now * level * toLeft;
			bus.right[first + i] += now * level * toRight;
			const next = turn * now - before;
			before = now;
			now = next;
			level *= fall;
		}
	}
	const [first, samples] = placeOn(bus, note.time, Math.round(0.012 * RATE));
	const click = new Filter(3200, 0.8);
	for (let i = 0; i < samples; i++) {
		click.run(2 * random() - 1);
		const value = click.band * knock * note.velocity ** 2 * 0.3 * (1 - i / samples) ** 3;
		bus.left[first + i] += value * toLeft;
		bus.right[first + i] += value * toRight;
	}
}

/** Electric piano by frequency modulation (Chowning 1973): a soft body and a short bright tine. */
export function tines(bus, note, _random, { bright = 1, last = 2.2 } = {}) {
	const envelope = new Envelope({ attack: 0.003, decay: last * 0.35, sustain: 0.12, release: 0.22 }, note.duration);
	const [first, samples] = placeOn(bus, note.time, envelope.samples);
	const [toLeft, toRight] = panGains(note.place ?? 0);
	const turn = (2 * Math.PI * hertz(note.pitch)) / RATE;
	const hit = note.velocity;
	let tine = hit ** 2 * bright;
	let index = 0.25 + 1.5 * hit ** 2 * bright;
	const tineFall = Math.exp(-1 / (0.09 * RATE));
	const indexFall = Math.exp(-1 / (0.5 * RATE));
	for (let i = 0; i < samples; i++) {
		const level = envelope.next();
		const body = Math.sin(turn * i + index * Math.sin(turn * i));
		const high = 0.16 * tine * Math.sin(turn * i + 0.6 * Math.sin(turn * 14 * i));
		const value = (body * level + high) * 0.17 * hit;
		// The vibrating cabinet swings from side to side.
		const swing = 0.22 * Math.sin((2 * Math.PI * 4.6 * (first + i)) / RATE);
		bus.left[first + i] += value * toLeft * (1 + swing);
		bus.right[first + i] += value * toRight * (1 - swing);
		tine *= tineFall;
		index = 0.2 + (index - 0.2) * indexFall;
	}
}
