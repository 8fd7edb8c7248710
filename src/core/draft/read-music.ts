import type { Analysis } from "../music/index.ts";
import { type BeatMap, type Curve, createBeatMap, type Grid, type Section } from "../show/index.ts";

/** What a rough cut reads from the analysis. */
export interface MusicPlan {
	readonly grid: Grid;
	readonly beatMap: BeatMap;
	readonly sections: readonly Section[];
	/** By letter, in order of first appearance: 0 calm … 1 full. */
	readonly energies: ReadonlyMap<string, number>;
	/** Of a stretch in beats: 0..1, how much happens. */
	density(from: number, to: number): number;
	/** Bars at which a long section turns: positions, beats. */
	turnsOf(section: Section): number[];
}

/** A section longer than this many seconds gets one more transition in its midst. */
const LONG = 26;

export function readMusic(analysis: Analysis): MusicPlan {
	const grid: Grid = { beats: [...analysis.beats], bars: analysis.bars, source: "analysed" };
	const beatMap = createBeatMap(grid);
	const loudness = analysis.curves.find((curve) => curve.name === "loudness");
	const onset = analysis.curves.find((curve) => curve.name === "onset");
	const mean = (curve: Curve | undefined, from: number, to: number): number => {
		if (!curve || curve.values.length === 0) return 0.5;
		const first = Math.max(0, Math.floor(beatMap.secondsAt(from) * curve.rate));
		const last = Math.min(curve.values.length, Math.ceil(beatMap.secondsAt(to) * curve.rate));
		let sum = 0;
		for (let i = first; i < last; i++) sum += curve.values[i];
		return last > first ? sum / (last - first) : 0;
	};

	const heard = analysis.sections.filter((section) => section.toBeat > section.fromBeat);
	const sums = new Map<string, { loud: number; beats: number }>();
	for (const section of heard) {
		const sum = sums.get(section.letter) ?? { loud: 0, beats: 0 };
		const beats = section.toBeat - section.fromBeat;
		sum.loud += beats * mean(loudness, section.fromBeat, section.toBeat);
		sum.beats += beats;
		sums.set(section.letter, sum);
	}
	const raw = [...sums].map(([letter, sum]) => [letter, sum.loud / sum.beats] as const);
	const energies = new Map(spread(raw));
	const sections = heard.map(
		(section, i): Section => ({
			id: `s${i + 1}`,
			letter: section.letter,
			name: sayEnergy(energies.get(section.letter) ?? 0.5),
			from: section.fromBeat,
			to: section.toBeat,
		}),
	);
	const whole = mean(onset, 0, Math.max(1, analysis.beats.length));
	return {
		grid,
		beatMap,
		sections,
		energies,
		density: (from, to) =>
			Math.min(1, (0.5 * mean(onset, from, to)) / Math.max(1e-6, whole) + 0.25 * mean(loudness, from, to)),
		turnsOf: (section) => turns(section, beatMap),
	};
}

/** Ranks spread evenly over 0..1: between letters it is the order that matters, not the decibels. */
function spread(raw: readonly (readonly [string, number])[]): [string, number][] {
	const ordered = [...raw].sort((a, b) => a[1] - b[1]);
	return raw.map(([letter, loud]) => {
		const rank = ordered.findIndex((one) => one[0] === letter);
		return [letter, raw.length < 2 ? Math.max(0.3, loud) : rank / (raw.length - 1)];
	});
}

function sayEnergy(energy: number): string {
	if (energy < 0.34) return "calm";
	return energy < 0.67 ? "moving" : "full";
}

/** The bar nearest the middle of a long section that keeps to its eight- or four-bar phrases. */
function turns(section: Section, beatMap: BeatMap): number[] {
	const seconds = beatMap.secondsAt(section.to) - beatMap.secondsAt(section.from);
	const parts = Math.floor(seconds / LONG) + 1;
	if (parts < 2) return [];
	const first = beatMap.barAt(section.from + 1e-6).bar;
	const bars = beatMap.barAt(section.to + 1e-6).bar - first;
	const found: number[] = [];
	for (let part = 1; part < parts; part++) {
		const ideal = (bars * part) / parts;
		const step = bars / parts >= 6 ? 4 : 2;
		const bar = Math.round(ideal / step) * step;
		const position = beatMap.positionOf(first + bar);
		const before = found.at(-1) ?? section.from;
		if (position > before + 7.5 && position < section.to - 7.5) found.push(position);
	}
	return found;
}
