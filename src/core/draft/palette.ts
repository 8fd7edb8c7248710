import type { Paint } from "../show/index.ts";

/** Two or three colours that go together, from calm to full. */
interface Palette {
	readonly low: string;
	readonly high: string;
	readonly accent: string;
	readonly energy: number;
}

/** Deep to light, none of them pure: pure blue and pure red look dim beside the others. */
const PALETTES: readonly Palette[] = [
	{ low: "#2f5fd0", high: "#7fd4e8", accent: "#f4ead2", energy: 0.1 },
	{ low: "#6a4fd8", high: "#58b7e6", accent: "#ffe3b0", energy: 0.3 },
	{ low: "#1f9e8f", high: "#b7e07a", accent: "#fff2c4", energy: 0.45 },
	{ low: "#d8742c", high: "#ffd27a", accent: "#fff0d8", energy: 0.65 },
	{ low: "#e0486e", high: "#ffb25e", accent: "#fff0d8", energy: 0.85 },
	{ low: "#f0a020", high: "#fff0c8", accent: "#8fd8ff", energy: 1 },
];

/** A palette for each letter, near to its energy, no two alike while there are enough. */
export function choosePalettes(energies: ReadonlyMap<string, number>): Map<string, Palette> {
	const left = [...PALETTES];
	const chosen = new Map<string, Palette>();
	for (const [letter, energy] of energies) {
		const pool = left.length > 0 ? left : PALETTES;
		const best = pool.reduce((a, b) => (Math.abs(b.energy - energy) < Math.abs(a.energy - energy) ? b : a));
		const at = left.indexOf(best);
		if (at >= 0) left.splice(at, 1);
		chosen.set(letter, best);
	}
	return chosen;
}

/** Fastest swell, pulses a second: WCAG 2.2, 2.3.1, allows three flashes; this stays well below. */
const FASTEST_SWELL = 2.4;

/**
 * How a section is painted: a gradient where the music is calm, swells where it is dense.
 * @param dense 0..1, how much happens a beat
 * @param beatSeconds seconds a beat
 * @param second the second half of a long section: the colours change places
 */
export function paintSection(palette: Palette, dense: number, beatSeconds: number, second: boolean): Paint {
	const [from, to] = second ? [palette.high, palette.low] : [palette.low, palette.high];
	if (dense > 0.62) {
		let every = 1;
		while (every * beatSeconds < 1 / FASTEST_SWELL) every *= 2;
		return { kind: "swell", colour: second ? palette.accent : palette.high, every, floor: 0.4 };
	}
	return { kind: "gradient", from, to, axis: second ? "out" : "up" };
}
