/** Heights of a row's lanes in CSS pixels, from its top. One place, so that drawing and pointer agree. */
export interface Lanes {
	readonly height: number;
	readonly waveTop: number;
	readonly waveHeight: number;
	readonly ticks: number;
	readonly markY: number;
	readonly beamTop: number;
	readonly beamHeight: number;
	readonly ribbonTop: number;
	readonly ribbonHeight: number;
	readonly ribbonCount: number;
	readonly levelTop: number;
	readonly levelHeight: number;
}

/** @param spacious the strip: taller lanes; @param ribbons groups that have colours of their own, at most 3 are shown */
export function layLanes(spacious: boolean, ribbons: number): Lanes {
	const ribbonCount = Math.min(3, Math.max(1, ribbons));
	const waveTop = 20;
	const waveHeight = spacious ? 120 : 36;
	const ticks = waveTop + waveHeight + 2;
	const beamTop = ticks + (spacious ? 30 : 24);
	const beamHeight = spacious ? 24 : 16;
	const ribbonTop = beamTop + beamHeight + 8;
	const ribbonHeight = spacious ? 14 : 9;
	const levelTop = ribbonTop + ribbonCount * (ribbonHeight + 3) + 5;
	const levelHeight = spacious ? 48 : 18;
	return {
		height: levelTop + levelHeight + 6,
		waveTop,
		waveHeight,
		ticks,
		markY: beamTop - 10,
		beamTop,
		beamHeight,
		ribbonTop,
		ribbonHeight,
		ribbonCount,
		levelTop,
		levelHeight,
	};
}
