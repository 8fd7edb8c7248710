/**
 * sRGB transfer functions (IEC 61966-2-1:1999): between coded values 0..1 and linear light 0..1. The threshold of the
 * linear stretch is the standard's own, 0.04045 coded and 0.0031308 linear.
 */
export function toLinear(coded: number): number {
	return coded <= 0.04045 ? coded / 12.92 : ((coded + 0.055) / 1.055) ** 2.4;
}

export function toCoded(linear: number): number {
	return linear <= 0.0031308 ? 12.92 * linear : 1.055 * linear ** (1 / 2.4) - 0.055;
}

/** Linear light of each of the 256 bytes. */
export function createLinearTable(): Float32Array {
	return Float32Array.from({ length: 256 }, (_, byte) => toLinear(byte / 255));
}

/** Steps of the first guess; the byte is then put right against the exact borders. */
const GUESSES = 4096;

/** Turns linear light into bytes without a power for each: exact to the byte, clamped to 0..1. */
export function createEncoder(): (linear: number) => number {
	// borders[b]: linear light from which on byte b + 1 is nearer than byte b.
	const borders = Float64Array.from({ length: 256 }, (_, byte) =>
		byte === 255 ? Infinity : toLinear((byte + 0.5) / 255),
	);
	const guesses = new Uint8Array(GUESSES + 1);
	let byte = 0;
	for (let i = 0; i <= GUESSES; i++) {
		while (i / GUESSES >= borders[byte]) byte++;
		guesses[i] = byte;
	}
	return (linear) => {
		if (!(linear > 0)) return 0;
		if (linear >= 1) return 255;
		let value = guesses[Math.floor(linear * GUESSES)];
		while (linear >= borders[value]) value++;
		return value;
	};
}

/** #rrggbb as linear light. */
export function linearOf(colour: string): [number, number, number] {
	const value = Number.parseInt(colour.slice(1), 16);
	return [toLinear(((value >> 16) & 255) / 255), toLinear(((value >> 8) & 255) / 255), toLinear((value & 255) / 255)];
}

/** Relative luminance of linear sRGB, 0..1 (WCAG 2.2, from ITU-R BT.709's primaries). */
export function luminanceOf(red: number, green: number, blue: number): number {
	return 0.2126 * red + 0.7152 * green + 0.0722 * blue;
}
