/**
 * SHA-256 as FIPS 180-4 (2015) defines it, over bytes handed in piece by piece. It names soundtracks, shows and the
 * files of a hand-off, in page, worker and Node alike (the browser's own is asynchronous and wants the whole at once).
 */

/** First 32 bits of the fractional parts of the cube roots of the first 64 primes (FIPS 180-4 §4.2.2). */
const ROUND = fractions(64, 1 / 3);
/** Likewise of the square roots of the first eight (§5.3.3). */
const START = fractions(8, 1 / 2);

function fractions(count: number, power: number): Uint32Array {
	const words = new Uint32Array(count);
	for (let candidate = 2, found = 0; found < count; candidate++) {
		let prime = true;
		for (let divisor = 2; divisor * divisor <= candidate; divisor++) if (candidate % divisor === 0) prime = false;
		if (!prime) continue;
		// 52 bits of mantissa hold the whole part (≤ 7, or ≤ 5) and the 32 bits wanted with 16 to spare.
		const root = candidate ** power;
		words[found++] = (root - Math.floor(root)) * 4294967296;
	}
	return words;
}

export interface Sha256 {
	/** Takes the next bytes; they are not kept. */
	update(bytes: Uint8Array): Sha256;
	/** 64 hexadecimal digits. Nothing may be added afterwards. */
	hex(): string;
}

export function createSha256(): Sha256 {
	const state = Uint32Array.from(START);
	const schedule = new Uint32Array(64);
	const block = new Uint8Array(64);
	let held = 0;
	let length = 0;
	let done = false;

	/** One 64-byte block of `bytes` at `offset` (§6.2.2). */
	const compress = (bytes: Uint8Array, offset: number): void => {
		for (let i = 0; i < 16; i++) {
			const at = offset + 4 * i;
			schedule[i] = (bytes[at] << 24) | (bytes[at + 1] << 16) | (bytes[at + 2] << 8) | bytes[at + 3];
		}
		for (let i = 16; i < 64; i++) {
			const x = schedule[i - 15];
			const y = schedule[i - 2];
			const small0 = ((x >>> 7) | (x << 25)) ^ ((x >>> 18) | (x << 14)) ^ (x >>> 3);
			const small1 = ((y >>> 17) | (y << 15)) ^ ((y >>> 19) | (y << 13)) ^ (y >>> 10);
			schedule[i] = (schedule[i - 16] + small0 + schedule[i - 7] + small1) | 0;
		}
		let a = state[0] | 0;
		let b = state[1] | 0;
		let c = state[2] | 0;
		let d = state[3] | 0;
		let e = state[4] | 0;
		let f = state[5] | 0;
		let g = state[6] | 0;
		let h = state[7] | 0;
		for (let i = 0; i < 64; i++) {
			const big1 = ((e >>> 6) | (e << 26)) ^ ((e >>> 11) | (e << 21)) ^ ((e >>> 25) | (e << 7));
			const one = (h + big1 + ((e & f) ^ (~e & g)) + ROUND[i] + schedule[i]) | 0;
			const big0 = ((a >>> 2) | (a << 30)) ^ ((a >>> 13) | (a << 19)) ^ ((a >>> 22) | (a << 10));
			const two = (big0 + ((a & b) ^ (a & c) ^ (b & c))) | 0;
			h = g;
			g = f;
			f = e;
			e = (d + one) | 0;
			d = c;
			c = b;
			b = a;
			a = (one + two) | 0;
		}
		state[0] += a;
		state[1] += b;
		state[2] += c;
		state[3] += d;
		state[4] += e;
		state[5] += f;
		state[6] += g;
		state[7] += h;
	};

	const update = (bytes: Uint8Array): Sha256 => {
		if (done) throw new Error("this digest has been read; start a new one");
		length += bytes.length;
		let at = 0;
		if (held > 0) {
			at = Math.min(64 - held, bytes.length);
			block.set(bytes.subarray(0, at), held);
			held += at;
			if (held < 64) return digest;
			compress(block, 0);
			held = 0;
		}
		for (; at + 64 <= bytes.length; at += 64) compress(bytes, at);
		block.set(bytes.subarray(at));
		held = bytes.length - at;
		return digest;
	};

	const hex = (): string => {
		if (!done) {
			const bits = length * 8;
			block[held++] = 0x80;
			if (held > 56) {
				block.fill(0, held);
				compress(block, 0);
				held = 0;
			}
			block.fill(0, held);
			const view = new DataView(block.buffer);
			view.setUint32(56, Math.floor(bits / 4294967296));
			view.setUint32(60, bits % 4294967296);
			compress(block, 0);
			done = true;
		}
		return Array.from(state, (word) => word.toString(16).padStart(8, "0")).join("");
	};
	const digest: Sha256 = { update, hex };
	return digest;
}

/** SHA-256 of `bytes` as 64 hexadecimal digits. */
export function sha256Hex(bytes: Uint8Array): string {
	return createSha256().update(bytes).hex();
}
