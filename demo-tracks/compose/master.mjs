// Mastering: a gentle compressor, then gain and limiter until the meter shows what was asked for.

import { integratedLoudness } from "./loudness.mjs";
import { Filter, RATE, raise } from "./sound.mjs";

/** Compresses a copy of the mix by `ratio` above `threshold` dBFS (RMS over ~60 ms, both sides together). */
function glue({ left, right }, { threshold, ratio }) {
	const out = { left: new Float32Array(left.length), right: new Float32Array(left.length) };
	const rumble = [new Filter(24, 0.707), new Filter(24, 0.707)];
	const follow = 1 - Math.exp(-1 / (0.06 * RATE));
	let power = 0;
	let gain = 1;
	for (let i = 0; i < left.length; i++) {
		rumble[0].run(left[i]);
		rumble[1].run(right[i]);
		const a = rumble[0].high;
		const b = rumble[1].high;
		power += (0.5 * (a * a + b * b) - power) * follow;
		if (i % 16 === 0) {
			const over = 10 * Math.log10(power + 1e-12) - threshold;
			gain = over > 0 ? 10 ** ((over * (1 / ratio - 1)) / 20) : 1;
		}
		out.left[i] = a * gain;
		out.right[i] = b * gain;
	}
	return out;
}

// Four-fold oversampling by a windowed sinc of 12 taps a phase, as BS.1770-4 annex 2 estimates true peaks.
const PHASES = Array.from({ length: 4 }, (_, phase) =>
	Array.from({ length: 12 }, (_unused, tap) => {
		const x = tap - 5 - phase / 4;
		if (x === 0) return 1;
		const window = 0.5 + 0.5 * Math.cos((Math.PI * x) / 6.5);
		return (Math.sin(Math.PI * x) / (Math.PI * x)) * window;
	}),
);

/** Greatest size, true peaks between samples included, around each sample. */
function truePeaks(left, right, gain, ceiling) {
	const peaks = new Float32Array(left.length);
	for (let i = 0; i < left.length; i++) {
		let peak = Math.max(Math.abs(left[i]), Math.abs(right[i])) * gain;
		// Between-sample peaks only matter where the samples are already near the ceiling.
		if (peak > 0.5 * ceiling && i >= 6 && i < left.length - 7) {
			for (const taps of PHASES) {
				let a = 0;
				let b = 0;
				for (let tap = 0; tap < 12; tap++) {
					a += left[i + tap - 5] * taps[tap];
					b += right[i + tap - 5] * taps[tap];
				}
				peak = Math.max(peak, Math.abs(a) * gain, Math.abs(b) * gain);
			}
		}
		peaks[i] = peak;
	}
	return peaks;
}

/**
 * Limits to `ceiling`: the gain needed, its running minimum over ±`ahead` samples, smoothed by a mean over the same
 * span, so that it has arrived when the peak does. Nothing is delayed: the whole signal is at hand.
 */
function limit({ left, right }, gain, ceiling) {
	const ahead = Math.round(0.004 * RATE);
	const peaks = truePeaks(left, right, gain, ceiling);
	const length = left.length;
	const least = new Float32Array(length);
	const queue = new Int32Array(length);
	let head = 0;
	let end = 0;
	const needed = (i) => (peaks[i] > ceiling ? ceiling / peaks[i] : 1);
	for (let i = 0; i < length + ahead; i++) {
		if (i < length) {
			while (end > head && needed(queue[end - 1]) >= needed(i)) end--;
			queue[end++] = i;
		}
		const at = i - ahead;
		if (at >= 0) {
			while (queue[head] < at - ahead) head++;
			least[at] = needed(queue[head]);
		}
	}
	const out = { left: new Float32Array(length), right: new Float32Array(length) };
	const span = 2 * ahead + 1;
	let sum = span;
	let slow = 1;
	const recover = 1 - Math.exp(-1 / (0.08 * RATE));
	const at = (i) => (i < 0 || i >= length ? 1 : least[i]);
	for (let i = 0; i < length; i++) {
		sum += at(i + ahead) - at(i - ahead - 1);
		const now = sum / span;
		// Down at once, up slowly: no pumping at the rate of the waves themselves.
		slow = now < slow ? now : slow + (now - slow) * recover;
		out.left[i] = left[i] * gain * slow;
		out.right[i] = right[i] * gain * slow;
	}
	return out;
}

// Hz, dB, q: weight below, less of the crowded middle, air above.
const TONE = [
	[80, 3, 0.55],
	[800, -1.5, 0.5],
	[9500, 2.5, 0.5],
];

/** Masters a mix to an integrated loudness (LUFS) under a true-peak ceiling (dBTP); fades the last `fade` seconds. */
export function master(mixed, { loudness, ceiling, ratio = 1.6, below = 8, fade = 1.2 }) {
	for (const side of [mixed.left, mixed.right]) for (const bell of TONE) raise(side, ...bell);
	const level = integratedLoudness(mixed.left, mixed.right);
	const pressed = glue(mixed, { threshold: level - below + 6, ratio });
	const length = mixed.left.length;
	const from = length - Math.round(fade * RATE);
	for (let i = from; i < length; i++) {
		const left = (length - 1 - i) / (length - from);
		pressed.left[i] *= left;
		pressed.right[i] *= left;
	}
	const top = 10 ** (ceiling / 20);
	let gain = 10 ** ((loudness - integratedLoudness(pressed.left, pressed.right)) / 20);
	let out = limit(pressed, gain, top);
	// The limiter takes a little loudness away: give it back, three times is enough.
	for (let i = 0; i < 3; i++) {
		gain *= 10 ** ((loudness - integratedLoudness(out.left, out.right)) / 20);
		out = limit(pressed, gain, top);
	}
	return out;
}
