// Seeded chance. Every hiss, drift and starting phase in the demo music comes from here, so that the same
// code always gives the same samples.

/**
 * A generator of numbers in [0, 1): mulberry32 (Tommy Ettinger, 2017, public domain).
 * Small, quick and good enough for noise; nothing here needs more than 2^32 draws.
 */
export function seeded(seed) {
	let state = seed >>> 0;
	return () => {
		state = (state + 0x6d2b79f5) >>> 0;
		let mixed = Math.imul(state ^ (state >>> 15), state | 1);
		mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
		return ((mixed ^ (mixed >>> 14)) >>> 0) / 4294967296;
	};
}

/** A seed from a name (FNV-1a), so that adding one track doesn't change the noise of the others. */
export function seedOf(name) {
	let hash = 0x811c9dc5;
	for (const character of name) hash = Math.imul(hash ^ character.codePointAt(0), 0x01000193);
	return hash >>> 0;
}
