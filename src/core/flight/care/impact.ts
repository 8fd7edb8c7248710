import { GRAVITY } from "./fall.ts";

/** Joules in a foot-pound force: 0.3048 m × 0.453 592 37 kg × 9.806 65 m/s² (NIST SP 811, appendix B). */
export const FOOT_POUND = 0.3048 * 0.45359237 * GRAVITY;

/** A mark on the scale of impact energy. A mark is not a permission: whether an aircraft may fly over people is law. */
export interface EnergyMark {
	/** Joules. */
	readonly energy: number;
	readonly source: string;
	/** Metres of fall from standing after which a drone passes it; null where it never does. */
	readonly height: number | null;
}

/** Joules: ½ m v². */
export function impactEnergy(mass: number, speed: number): number {
	return 0.5 * mass * speed * speed;
}

/**
 * The transfers of energy that 14 CFR 107.120(a)(1) and 107.130(a)(1) measure injury by: 11 and 25 foot-pounds from a
 * rigid object.
 * @param mass kg; @param terminalSpeed m/s
 */
export function energyMarks(mass: number, terminalSpeed: number): EnergyMark[] {
	return [
		{ feet: 11, source: "14 CFR 107.120" },
		{ feet: 25, source: "14 CFR 107.130" },
	].map(({ feet, source }) => {
		const energy = feet * FOOT_POUND;
		return { energy, source, height: fallHeightOf(Math.sqrt((2 * energy) / mass), terminalSpeed) };
	});
}

/** Metres of fall from standing after which the speed is reached: v² = u²·(1 − exp(−2gh/u²)); null: never. */
export function fallHeightOf(speed: number, terminalSpeed: number): number | null {
	const share = (speed / terminalSpeed) ** 2;
	if (share >= 1) return null;
	return (-(terminalSpeed ** 2) / (2 * GRAVITY)) * Math.log1p(-share);
}
