/**
 * Writes rows of numbers as ASCII bytes, without a string for each: tables of light run to millions of rows.
 */
export interface ByteRows {
	text(bytes: Uint8Array): void;
	/** A whole number from 0 to 255. */
	byte(value: number): void;
	/** Millionths of the unit, a whole number: written with six decimals, never as −0. */
	micro(value: number): void;
	comma(): void;
	newline(): void;
	/** Hands what is held to the sink. */
	flush(): void;
}

const ZERO = 48;
const SIZE = 1 << 16;

/** @param sink takes each piece; the bytes are its own to keep */
export function createByteRows(sink: (bytes: Uint8Array) => void): ByteRows {
	let buffer = new Uint8Array(SIZE);
	let at = 0;
	const digits = new Uint8Array(32);

	const flush = (): void => {
		if (at === 0) return;
		sink(buffer.subarray(0, at));
		buffer = new Uint8Array(SIZE);
		at = 0;
	};
	/** No single field is longer. */
	const room = (): void => {
		if (at > SIZE - 64) flush();
	};
	return {
		text(bytes) {
			if (at + bytes.length > SIZE) flush();
			buffer.set(bytes, at);
			at += bytes.length;
		},
		byte(value) {
			room();
			if (value >= 100) buffer[at++] = ZERO + Math.floor(value / 100);
			if (value >= 10) buffer[at++] = ZERO + (Math.floor(value / 10) % 10);
			buffer[at++] = ZERO + (value % 10);
		},
		micro(value) {
			room();
			let rest = value;
			if (rest < 0) {
				buffer[at++] = 45;
				rest = -rest;
			}
			let count = 0;
			while (rest > 0 || count < 7) {
				const next = Math.floor(rest / 10);
				digits[count++] = ZERO + (rest - next * 10);
				rest = next;
			}
			while (count > 6) buffer[at++] = digits[--count];
			buffer[at++] = 46;
			while (count > 0) buffer[at++] = digits[--count];
		},
		comma() {
			buffer[at++] = 44;
		},
		newline() {
			buffer[at++] = 10;
		},
		flush,
	};
}
