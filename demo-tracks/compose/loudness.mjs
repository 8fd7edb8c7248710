// Programme loudness by ITU-R BS.1770-4: the meter by which tracks are balanced and the master is set.

import { RATE } from "./sound.mjs";

// K-weighting at 48 kHz is given as coefficients; these are the analogue figures behind them (as De Man 2014 derives
// them), turned into biquads for any rate.
function weighting() {
	const shelf = (() => {
		const k = Math.tan((Math.PI * 1681.974450955533) / RATE);
		const q = 0.7071752369554196;
		const high = 10 ** (3.999843853973347 / 20);
		const middle = high ** 0.4996667741545416;
		const a0 = 1 + k / q + k * k;
		return [
			(high + (middle * k) / q + k * k) / a0,
			(2 * (k * k - high)) / a0,
			(high - (middle * k) / q + k * k) / a0,
			(2 * (k * k - 1)) / a0,
			(1 - k / q + k * k) / a0,
		];
	})();
	const pass = (() => {
		const k = Math.tan((Math.PI * 38.13547087602444) / RATE);
		const q = 0.5003270373238773;
		const a0 = 1 + k / q + k * k;
		return [1, -2, 1, (2 * (k * k - 1)) / a0, (1 - k / q + k * k) / a0];
	})();
	return [shelf, pass];
}

/** Mean K-weighted power of each 100 ms, both sides summed; outside `spans` of samples there is silence. */
export function weightedPowers(left, right, spans = [[0, left.length]]) {
	const hop = Math.round(RATE / 10);
	const powers = new Float64Array(Math.floor(left.length / hop));
	const [s, p] = weighting();
	for (const side of [left, right]) {
		for (const [from, to] of spans) {
			let x1 = 0;
			let x2 = 0;
			let y1 = 0;
			let y2 = 0;
			let z1 = 0;
			let z2 = 0;
			const first = Math.floor(from / hop);
			for (let block = first; block < powers.length && block * hop < to; block++) {
				let power = 0;
				for (let i = block * hop; i < (block + 1) * hop; i++) {
					const x = side[i];
					const y = s[0] * x + s[1] * x1 + s[2] * x2 - s[3] * y1 - s[4] * y2;
					const z = y - 2 * y1 + y2 - p[3] * z1 - p[4] * z2;
					x2 = x1;
					x1 = x;
					y2 = y1;
					y1 = y;
					z2 = z1;
					z1 = z;
					power += z * z;
				}
				powers[block] += power / hop;
			}
		}
	}
	return powers;
}

/** Integrated loudness in LUFS (gates at −70 LUFS and 10 LU below the mean of what is left); −Infinity for silence. */
export function integratedLoudness(left, right, spans) {
	const powers = weightedPowers(left, right, spans);
	const blocks = [];
	for (let i = 0; i + 4 <= powers.length; i++)
		blocks.push((powers[i] + powers[i + 1] + powers[i + 2] + powers[i + 3]) / 4);
	const level = (power) => -0.691 + 10 * Math.log10(power);
	const mean = (list) => list.reduce((sum, power) => sum + power, 0) / list.length;
	const heard = blocks.filter((power) => level(power) > -70);
	if (heard.length === 0) return Number.NEGATIVE_INFINITY;
	const gate = level(mean(heard)) - 10;
	return level(mean(heard.filter((power) => level(power) > gate)));
}
