/**
 * Seeded random numbers: the core has no other source of chance, so the same input gives the same answer everywhere.
 * Generator: sfc32 (Doty-Humphrey, PractRand), seeded through splitmix32.
 */
export interface SeededRandom {
	/** Uniform in [0, 1). */
	next(): number;
	/** A whole number in [0, below). */
	below(below: number): number;
}

/** @param seed any whole number; equal seeds give equal sequences */
export function createRandom(seed: number): SeededRandom {
	let s = seed | 0;
	const split = (): number => {
		s = (s + 0x9e3779b9) | 0;
		let z = s ^ (s >>> 16);
		z = Math.imul(z, 0x21f0aaad);
		z ^= z >>> 15;
		z = Math.imul(z, 0x735a2d97);
		return z ^ (z >>> 15);
	};
	let a = split();
	let b = split();
	let c = split();
	let counter = 1;
	const next = (): number => {
		const t = (((a + b) | 0) + counter) | 0;
		counter = (counter + 1) | 0;
		a = b ^ (b >>> 9);
		b = (c + (c << 3)) | 0;
		c = (c << 21) | (c >>> 11);
		c = (c + t) | 0;
		return (t >>> 0) / 4294967296;
	};
	for (let i = 0; i < 12; i++) next();
	return { next, below: (below) => Math.floor(next() * below) };
}
