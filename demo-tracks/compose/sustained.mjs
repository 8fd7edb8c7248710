// Bowed, blown and keyed sounds that hold: strings, brass, voices, reeds, whistle, bass and the big saws.

import { hertz } from "./pitch.mjs";
import { Envelope, Filter, panGains, placeOn, pulse, RATE, saw } from "./sound.mjs";

// Pitch, filter and vibrato move this many samples at a time: 0.7 ms, too short to hear as steps.
const CONTROL = 32;

/**
 * A stack of detuned saws through one low-pass a side: with the right figures strings, horns, a lead or a wall.
 * `cents`: detuning of each saw, shared out from left to right by `width`; `cutoff` Hz + `track` × pitch, opened by
 * `open` Hz as its own envelope rises; vibrato in cents, growing in after `late` seconds.
 */
export function saws(bus, note, random, options) {
	const {
		cents,
		width = 0.7,
		cutoff = 900,
		track = 1.5,
		open = 1500,
		opening = { attack: 0.01, decay: 0.3, sustain: 0.4, release: 0.3 },
		resonance = 0.7,
		envelope,
		vibrato = 0,
		vibratoRate = 5.2,
		late = 0.25,
		sweep,
	} = options;
	const loud = new Envelope(envelope, note.duration);
	const bright = new Envelope(opening, note.duration);
	const [first, samples] = placeOn(bus, note.time, loud.samples);
	const base = hertz(note.pitch);
	const count = cents.length;
	const phases = Float64Array.from(cents, () => random());
	const ratios = cents.map((cent) => 2 ** (cent / 1200));
	const steps = new Float64Array(count);
	const gains = cents.map((_, i) =>
		panGains(width * (count > 1 ? (2 * i) / (count - 1) - 1 : 0) * 0.9 + 0.5 * (note.place ?? 0)),
	);
	const left = new Filter(1000, resonance);
	const right = new Filter(1000, resonance);
	const level = (0.11 * note.velocity ** 1.3) / Math.sqrt(count);
	const drift = random() * 2 * Math.PI;
	for (let i = 0; i < samples; i++) {
		const open_ = bright.next();
		if (i % CONTROL === 0) {
			const seconds = i / RATE;
			const deep = vibrato * Math.min(1, Math.max(0, (seconds - late) / 0.35));
			const bend = 2 ** ((deep * Math.sin(2 * Math.PI * vibratoRate * seconds + drift)) / 1200);
			for (let j = 0; j < count; j++) steps[j] = (base * ratios[j] * bend) / RATE;
			const swept = sweep ? sweep((first + i) / RATE) : 1;
			const frequency = (cutoff + track * base + open * open_ * (0.4 + 0.6 * note.velocity)) * swept;
			left.tune(frequency);
			right.tune(frequency);
		}
		let toLeft = 0;
		let toRight = 0;
		for (let j = 0; j < count; j++) {
			const value = saw(phases[j], steps[j]);
			phases[j] += steps[j];
			if (phases[j] >= 1) phases[j] -= 1;
			toLeft += value * gains[j][0];
			toRight += value * gains[j][1];
		}
		const value = loud.next() * level;
		bus.left[first + i] += left.run(toLeft) * value;
		bus.right[first + i] += right.run(toRight) * value;
	}
}

/** Figures for `saws`. */
export const STRINGS = {
	cents: [-9, -4, 0, 5, 8],
	width: 0.9,
	cutoff: 500,
	track: 2.2,
	open: 900,
	opening: { attack: 0.35, decay: 1, sustain: 0.7, release: 0.6 },
	envelope: { attack: 0.16, decay: 0.6, sustain: 0.85, release: 0.7 },
	vibrato: 7,
};

export const CELLO = {
	cents: [-5, 0, 4],
	width: 0.3,
	cutoff: 300,
	track: 2.6,
	open: 900,
	opening: { attack: 0.05, decay: 0.5, sustain: 0.5, release: 0.4 },
	envelope: { attack: 0.05, decay: 0.5, sustain: 0.85, release: 0.35 },
	vibrato: 13,
};

export const HORN = {
	cents: [-4, 0, 5],
	width: 0.35,
	cutoff: 350,
	track: 1.2,
	open: 2600,
	opening: { attack: 0.035, decay: 0.25, sustain: 0.45, release: 0.25 },
	envelope: { attack: 0.014, decay: 0.3, sustain: 0.85, release: 0.25 },
	vibrato: 8,
	late: 0.35,
};

export const LEAD = {
	cents: [-7, 0, 7],
	width: 0.5,
	cutoff: 900,
	track: 2,
	open: 3600,
	opening: { attack: 0.004, decay: 0.25, sustain: 0.55, release: 0.2 },
	envelope: { attack: 0.004, decay: 0.2, sustain: 0.8, release: 0.18 },
	vibrato: 9,
	late: 0.3,
};

export const WALL = {
	cents: [-17, -11, -6, 0, 5, 10, 18],
	width: 1,
	cutoff: 900,
	track: 2,
	open: 5200,
	opening: { attack: 0.003, decay: 0.5, sustain: 0.6, release: 0.3 },
	envelope: { attack: 0.003, decay: 0.4, sustain: 0.8, release: 0.22 },
};

export const ARPEGGIO = {
	cents: [-6, 6],
	width: 0.8,
	cutoff: 250,
	track: 1,
	open: 3800,
	opening: { attack: 0.002, decay: 0.07, sustain: 0.05, release: 0.12 },
	resonance: 1.6,
	envelope: { attack: 0.002, decay: 0.14, sustain: 0.25, release: 0.12 },
};

// Formants of a sung "ah": Hz, resonance, loudness.
const AH = [
	[700, 7, 1],
	[1120, 9, 0.6],
	[2650, 10, 0.3],
	[3500, 10, 0.14],
];

/** A choir on "ah": three singers a note, each side its own, shaped by formants. */
export function choir(bus, note, random, { attack = 0.09, release = 0.6 } = {}) {
	const loud = new Envelope({ attack, decay: 0.8, sustain: 0.85, release }, note.duration);
	const [first, samples] = placeOn(bus, note.time, loud.samples);
	const base = hertz(note.pitch);
	const level = 0.3 * note.velocity ** 1.3;
	for (const side of [bus.left, bus.right]) {
		const singers = [0, 1, 2].map(() => ({
			phase: random(),
			cents: (random() - 0.5) * 18,
			rate: 4.6 + random(),
			turn: random() * 6.28,
			step: 0,
		}));
		const formants = AH.map(([frequency, resonance]) => new Filter(frequency, resonance));
		const voice = new Envelope({ attack, decay: 0.8, sustain: 0.85, release }, note.duration);
		for (let i = 0; i < samples; i++) {
			let source = 0;
			for (const singer of singers) {
				if (i % CONTROL === 0) {
					const wave = Math.sin((2 * Math.PI * singer.rate * i) / RATE + singer.turn);
					singer.step = (base * 2 ** ((singer.cents + 14 * wave) / 1200)) / RATE;
				}
				source += saw(singer.phase, singer.step);
				singer.phase += singer.step;
				if (singer.phase >= 1) singer.phase -= 1;
			}
			source += 0.12 * (2 * random() - 1);
			let sung = 0.05 * source;
			for (let j = 0; j < formants.length; j++) {
				formants[j].run(source);
				sung += (formants[j].band * AH[j][2]) / AH[j][1];
			}
			side[first + i] += sung * voice.next() * level;
		}
	}
}

/** Free reeds of an accordion: two narrow pulses a few cents apart, so that they beat, and the bellows' push. */
export function reed(bus, note, random, { musette = 7, bright = 1 } = {}) {
	const loud = new Envelope({ attack: 0.009, decay: 0.25, sustain: 0.82, release: 0.09 }, note.duration);
	const [first, samples] = placeOn(bus, note.time, loud.samples);
	const [toLeft, toRight] = panGains(note.place ?? 0);
	const base = hertz(note.pitch);
	const up = (base * 2 ** (musette / 1200)) / RATE;
	const down = (base * 2 ** (-musette / 1200)) / RATE;
	const octave = (base * 2 * 2 ** (2 / 1200)) / RATE;
	let a = random();
	let b = random();
	let c = random();
	const shade = new Filter(1400 * bright + 3.5 * base, 0.75);
	const level = 0.1 * note.velocity ** 1.2;
	for (let i = 0; i < samples; i++) {
		const one = pulse(a, up, 0.27);
		const two = pulse(b, down, 0.31);
		const high = 0.28 * pulse(c, octave, 0.4);
		a = (a + up) % 1;
		b = (b + down) % 1;
		c = (c + octave) % 1;
		const push = loud.next() * level;
		const middle = shade.run(one + two + high) * push;
		const side = 0.22 * (one - two) * push;
		bus.left[first + i] += (middle + side) * toLeft;
		bus.right[first + i] += (middle - side) * toRight;
	}
}

/** A wooden whistle: few partials, a chiff of breath at the start, vibrato that comes late. */
export function whistle(bus, note, random, { breath = 0.5, vibrato = 16 } = {}) {
	const loud = new Envelope({ attack: 0.018, decay: 0.3, sustain: 0.88, release: 0.14 }, note.duration);
	const [first, samples] = placeOn(bus, note.time, loud.samples);
	const [toLeft, toRight] = panGains(note.place ?? 0);
	const base = hertz(note.pitch);
	const air = new Filter(base * 2.5, 1.4);
	const level = 0.2 * note.velocity ** 1.2;
	let phase = 0;
	let step = base / RATE;
	for (let i = 0; i < samples; i++) {
		if (i % CONTROL === 0) {
			const seconds = i / RATE;
			const deep = vibrato * Math.min(1, Math.max(0, (seconds - 0.22) / 0.4));
			// The pitch speaks a little low and settles, as blown pipes do.
			const bend = deep * Math.sin(2 * Math.PI * 5.1 * seconds) - 14 * Math.exp(-seconds / 0.03);
			step = (base * 2 ** (bend / 1200)) / RATE;
		}
		phase += 2 * Math.PI * step;
		const chiff = 0.35 + 1.6 * Math.exp(-i / (0.028 * RATE));
		air.run(2 * random() - 1);
		const tone = Math.sin(phase) + 0.3 * Math.sin(2 * phase) + 0.16 * Math.sin(3 * phase) + 0.05 * Math.sin(4 * phase);
		const value = (tone + 0.22 * breath * chiff * air.band) * loud.next() * level;
		bus.left[first + i] += value * toLeft;
		bus.right[first + i] += value * toRight;
	}
}

/** Bass: a sine for the weight and a filtered saw for the edge; `bite` opens the filter, `last` makes it a plucked one. */
export function bass(bus, note, _random, options = {}) {
	const { bite = 700, last = 1.5, sustain = 0.5, drive = 1.4, release = 0.07, resonance = 0.9, edge = 0.7 } = options;
	const loud = new Envelope({ attack: 0.002, decay: last * 0.4, sustain, release }, note.duration);
	const [first, samples] = placeOn(bus, note.time, loud.samples);
	const base = hertz(note.pitch);
	const step = base / RATE;
	const shade = new Filter(1000, resonance);
	const level = 0.3 * note.velocity;
	let phase = 0;
	let open = 1;
	const close = Math.exp(-CONTROL / (0.11 * RATE));
	for (let i = 0; i < samples; i++) {
		if (i % CONTROL === 0) {
			shade.tune(1.6 * base + 90 + bite * open * note.velocity);
			open = options.hold ? options.hold((first + i) / RATE) : open * close;
		}
		const weight = Math.sin(2 * Math.PI * phase);
		const rough = shade.run(edge * saw(phase, step));
		phase += step;
		if (phase >= 1) phase -= 1;
		const value = (Math.tanh(drive * (weight + rough)) / drive) * loud.next() * level;
		bus.left[first + i] += value;
		bus.right[first + i] += value;
	}
}
