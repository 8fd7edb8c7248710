// Drums and cymbals, all synthesised, all at their loudest within a few milliseconds of their note.

import { Filter, panGains, placeOn, RATE } from "./sound.mjs";

function strike(bus, note, seconds, sample) {
	const [first, samples] = placeOn(bus, note.time, Math.round(seconds * RATE));
	const [toLeft, toRight] = panGains(note.place ?? 0);
	const rest = Math.round(0.004 * RATE);
	for (let i = 0; i < samples; i++) {
		// The last 4 ms are faded so that nothing ends in a tick.
		const value = sample(i, i / RATE) * Math.min(1, (samples - i) / rest);
		bus.left[first + i] += value * toLeft;
		bus.right[first + i] += value * toRight;
	}
}

/** Bass drum of a kit: a sine that drops from `from` to `to` Hz, and the beater's click. */
export function kick(bus, note, random, { from = 170, to = 49, drop = 0.032, last = 0.13, click = 0.5 } = {}) {
	const tick = new Filter(3500, 0.9);
	let phase = 0;
	strike(bus, note, last * 5, (_, t) => {
		phase += (2 * Math.PI * (to + (from - to) * Math.exp(-t / drop))) / RATE;
		tick.run(2 * random() - 1);
		const beater = click * note.velocity * tick.band * Math.exp(-t / 0.0025);
		const body = Math.tanh(1.8 * Math.sin(phase)) * Math.exp(-t / last);
		return 0.5 * note.velocity * (body * Math.min(1, t / 0.0008) + beater);
	});
}

/** Snare: two modes of the head and the rattle of the wires. */
export function snare(bus, note, random, { tune = 186, wires = 1, last = 0.11, bright = 5200 } = {}) {
	const rattle = new Filter(bright, 0.5);
	const floor = new Filter(900, 0.7);
	strike(bus, note, last * 6, (_, t) => {
		const slide = 1 + 0.25 * Math.exp(-t / 0.012);
		const head =
			Math.sin(2 * Math.PI * tune * slide * t) * Math.exp(-t / 0.07) +
			0.6 * Math.sin(2 * Math.PI * tune * 1.78 * t) * Math.exp(-t / 0.045);
		floor.run(2 * random() - 1);
		rattle.run(floor.high);
		const hiss = (0.7 * rattle.band + 0.45 * floor.high * Math.exp(-t / 0.03)) * Math.exp(-t / last);
		return 0.36 * note.velocity * Math.tanh(1.3 * (0.7 * head + wires * (0.4 + 0.6 * note.velocity) * hiss));
	});
}

/** Hand clap: four quick bursts and the room after them. */
export function clap(bus, note, random) {
	const palm = new Filter(1250, 1.1);
	const air = new Filter(700, 0.7);
	strike(bus, note, 0.42, (_, t) => {
		air.run(2 * random() - 1);
		palm.run(air.high);
		const since = t < 0.027 ? t % 0.009 : t - 0.027;
		const shape = t < 0.027 ? Math.exp(-since / 0.0035) : 0.75 * Math.exp(-since / 0.075);
		return 0.5 * note.velocity * shape * (palm.band + 0.25 * air.high);
	});
}

// Six squares that share no common measure: the metal of hats and cymbals.
const METAL = [205.3, 304.4, 369.6, 522.7, 540, 800];

function metal(scale) {
	const phases = new Float64Array(METAL.length);
	return () => {
		let sum = 0;
		for (let j = 0; j < METAL.length; j++) {
			phases[j] += (METAL[j] * scale) / RATE;
			if (phases[j] >= 1) phases[j] -= 1;
			sum += phases[j] < 0.5 ? 1 : -1;
		}
		return sum / METAL.length;
	};
}

/** Hi-hat; `last` seconds of decay: 0.03 closed, 0.25 open. */
export function hat(bus, note, random, { last = 0.032, tone = 7800 } = {}) {
	const cluster = metal(8.1);
	const thin = new Filter(tone, 0.8);
	const again = new Filter(tone * 0.9, 0.7);
	strike(bus, note, last * 5, (_, t) => {
		thin.run(0.6 * cluster() + 0.6 * (2 * random() - 1));
		again.run(thin.high);
		return 0.3 * note.velocity * again.high * Math.exp(-t / (last * (0.6 + 0.4 * note.velocity)));
	});
}

/** Crash or ride: metal and noise, bright at first, each side on its own. */
export function cymbal(bus, note, random, { last = 0.9, ping = 0, body = 3200 } = {}) {
	const [toLeft, toRight] = panGains(note.place ?? 0);
	const [first, samples] = placeOn(bus, note.time, Math.round(last * 4.5 * RATE));
	for (const [side, gain, scale] of [
		[bus.left, toLeft, 5.4],
		[bus.right, toRight, 5.62],
	]) {
		const cluster = metal(scale);
		const thin = new Filter(body, 0.6);
		const shade = new Filter(15000, 0.6);
		for (let i = 0; i < samples; i++) {
			const t = i / RATE;
			if (i % 64 === 0) shade.tune(5500 + 9500 * Math.exp(-t / (last * 0.5)));
			thin.run(0.5 * cluster() + (0.9 - 0.5 * ping) * (2 * random() - 1));
			const wash = shade.run(thin.high) * (Math.exp(-t / last) * 0.7 + 0.5 * Math.exp(-t / 0.05));
			const stick = ping * Math.sin(2 * Math.PI * 3150 * t) * Math.exp(-t / 0.12);
			const tail = Math.min(1, (samples - i) / 400);
			side[first + i] += 0.22 * note.velocity * gain * (wash + 0.4 * stick) * tail;
		}
	}
}

/** Tom or kettle: pitch in MIDI, a head that sinks a little as it rings. */
export function tom(bus, note, random, { last = 0.22, skin = 0.4 } = {}) {
	const base = 440 * 2 ** ((note.pitch - 69) / 12);
	const slap = new Filter(base * 6, 0.7);
	let phase = 0;
	strike(bus, note, last * 5, (_, t) => {
		phase += (2 * Math.PI * base * (1 + 0.55 * Math.exp(-t / 0.03))) / RATE;
		slap.run(2 * random() - 1);
		const body = Math.sin(phase) + 0.25 * Math.sin(1.59 * phase) * Math.exp(-t / 0.06);
		const value = body * Math.exp(-t / last) + skin * slap.low * Math.exp(-t / 0.02);
		return 0.45 * note.velocity * Math.tanh(1.2 * value);
	});
}

/** The big drum on the quay: deep, slow to fall silent. */
export function quayDrum(bus, note, random) {
	const thud = new Filter(320, 0.8);
	let phase = 0;
	strike(bus, note, 2.2, (_, t) => {
		phase += (2 * Math.PI * (54 + 46 * Math.exp(-t / 0.04))) / RATE;
		thud.run(2 * random() - 1);
		const body = Math.sin(phase) * Math.exp(-t / 0.38) + 0.4 * Math.sin(1.53 * phase) * Math.exp(-t / 0.16);
		return 0.5 * note.velocity * Math.tanh(1.4 * (body + 1.2 * thud.low * Math.exp(-t / 0.035)));
	});
}

/** Shaken things: shaker (`bright` 6000) or tambourine with jingles. */
export function shake(bus, note, random, { last = 0.035, bright = 6200, jingles = 0 } = {}) {
	const grain = new Filter(bright, 1.1);
	const cluster = metal(13.7);
	strike(bus, note, last * 6, (_, t) => {
		grain.run(2 * random() - 1 + jingles * 1.6 * cluster());
		const swell = Math.min(1, t / 0.003);
		return 0.3 * note.velocity * swell * grain.band * Math.exp(-t / last);
	});
}

/** A stick on the rim, or a wood block, with a pitch. */
export function rim(bus, note, random, { tune = 1650, last = 0.022 } = {}) {
	const edge = new Filter(tune * 1.6, 1.5);
	strike(bus, note, last * 6, (_, t) => {
		edge.run(2 * random() - 1);
		const wood = Math.sin(2 * Math.PI * tune * t) + 0.7 * Math.sin(2 * Math.PI * tune * 0.61 * t);
		return 0.3 * note.velocity * (0.6 * wood * Math.exp(-t / last) + edge.band * Math.exp(-t / 0.005));
	});
}

/** Noise that climbs through the length of its note and stops dead at its end: the run-up to a downbeat. */
export function riser(bus, note, random, { from = 350, to = 7500, bend = 2.2 } = {}) {
	const [first, samples] = placeOn(bus, note.time, Math.round(note.duration * RATE));
	for (const side of [bus.left, bus.right]) {
		const climb = new Filter(from, 2.2);
		for (let i = 0; i < samples; i++) {
			const way = i / samples;
			if (i % 32 === 0) climb.tune(from * (to / from) ** way);
			climb.run(2 * random() - 1);
			const stop = Math.min(1, (samples - i) / 200);
			side[first + i] += 0.3 * note.velocity * way ** bend * climb.band * stop;
		}
	}
}

/** A blow that shakes the floor: a falling sine and a burst of dark noise. */
export function impact(bus, note, random) {
	const dark = new Filter(2400, 0.6);
	let phase = 0;
	strike(bus, note, 2.6, (i, t) => {
		phase += (2 * Math.PI * (34 + 60 * Math.exp(-t / 0.22))) / RATE;
		if (i % 64 === 0) dark.tune(160 + 3200 * Math.exp(-t / 0.18));
		const burst = dark.run(2 * random() - 1) * Math.exp(-t / 0.35);
		return 0.5 * note.velocity * (Math.sin(phase) * Math.exp(-t / 0.6) + 0.8 * burst);
	});
}
