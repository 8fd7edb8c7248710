// The raw matter of every instrument: band-limited waves, filters, envelopes.

/** Samples a second of all that is rendered here. */
export const RATE = 44100;

/**
 * A saw of a phase in [0, 1) that advances by `step` a sample, its jump rounded off by a polynomial
 * (polyBLEP: Välimäki & Huovilainen 2007) so that it doesn't alias audibly.
 */
export function saw(phase, step) {
	let value = 2 * phase - 1;
	if (phase < step) {
		const t = phase / step;
		value -= t + t - t * t - 1;
	} else if (phase > 1 - step) {
		const t = (phase - 1) / step;
		value -= t * t + t + t + 1;
	}
	return value;
}

/** A pulse of the given width as the difference of two saws. */
export function pulse(phase, step, width) {
	const other = phase + width;
	return saw(phase, step) - saw(other >= 1 ? other - 1 : other, step);
}

/** State-variable filter with zero-delay feedback (Zavalishin 2012): `run` updates, then read low, band or high. */
export class Filter {
	constructor(frequency, resonance = 0.707) {
		this.first = 0;
		this.second = 0;
		this.low = 0;
		this.band = 0;
		this.high = 0;
		this.tune(frequency, resonance);
	}

	tune(frequency, resonance) {
		const safe = Math.min(Math.max(frequency, 10), RATE * 0.45);
		this.g = Math.tan((Math.PI * safe) / RATE);
		if (resonance) this.k = 1 / resonance;
		this.scale = 1 / (1 + this.g * (this.g + this.k));
	}

	run(input) {
		this.high = (input - (this.g + this.k) * this.first - this.second) * this.scale;
		const up = this.g * this.high;
		this.band = up + this.first;
		this.first = this.band + up;
		const over = this.g * this.band;
		this.low = over + this.second;
		this.second = this.low + over;
		return this.low;
	}
}

/**
 * Attack (linear, seconds), decay (time constant) to a sustained level, release (seconds to −60 dB) after `duration`.
 * `samples` is how many samples it takes altogether.
 */
export class Envelope {
	constructor({ attack = 0.004, decay = 0.2, sustain = 0.7, release = 0.2 }, duration) {
		this.attack = Math.max(1, Math.round(attack * RATE));
		this.fall = 1 - Math.exp(-1 / (decay * RATE));
		this.sustain = sustain;
		this.off = Math.max(this.attack, Math.round(duration * RATE));
		this.fade = 10 ** (-3 / (release * RATE));
		this.samples = this.off + Math.round(release * RATE);
		this.value = 0;
		this.count = 0;
	}

	next() {
		const i = this.count++;
		if (i < this.attack) this.value = (i + 1) / this.attack;
		else if (i < this.off) this.value += (this.sustain - this.value) * this.fall;
		else this.value *= this.fade;
		return this.value;
	}
}

/** Gains of left and right for a place from −1 to 1, power kept even. */
export function panGains(place) {
	const angle = ((place + 1) * Math.PI) / 4;
	return [Math.cos(angle) * Math.SQRT2, Math.sin(angle) * Math.SQRT2];
}

/** First sample and how many samples of a sound fit before the bus ends. */
export function placeOn(bus, time, samples) {
	const first = Math.round(time * RATE);
	return [first, Math.max(0, Math.min(samples, bus.left.length - first))];
}

/** Takes away what lies below a frequency, in place. */
export function cutBelow(samples, frequency) {
	const cut = new Filter(frequency, 0.707);
	for (let i = 0; i < samples.length; i++) {
		cut.run(samples[i]);
		samples[i] = cut.high;
	}
}

/** Takes away what lies above a frequency, in place. */
export function cutAbove(samples, frequency) {
	const cut = new Filter(frequency, 0.707);
	for (let i = 0; i < samples.length; i++) samples[i] = cut.run(samples[i]);
}

/** A bell, in place: the band output added back in leaves what is far away untouched. */
export function raise(samples, frequency, decibels, q) {
	const ring = new Filter(frequency, q);
	const gain = (10 ** (decibels / 20) - 1) / q;
	for (let i = 0; i < samples.length; i++) {
		ring.run(samples[i]);
		samples[i] += gain * ring.band;
	}
}
