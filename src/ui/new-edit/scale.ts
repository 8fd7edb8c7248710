import type { Analysis } from "../../core/music/index.ts";

/** Seconds to pixels, the same for both soundtracks so that what was kept goes straight down. */
export interface Scale {
	readonly width: number;
	x(seconds: number): number;
	seconds(x: number): number;
}

export function createScale(width: number, longest: number): Scale {
	const by = width / Math.max(1e-6, longest);
	return { width, x: (seconds) => seconds * by, seconds: (x) => x / by };
}

/** Outline of a waveform as an SVG path, as high as ±1 of `height`, between two seconds. */
export function wavePath(analysis: Analysis, scale: Scale, height: number): string {
	const { values, rate } = analysis.peaks;
	const length = values.length / 2;
	const columns = Math.max(1, Math.floor(scale.x(analysis.duration) / 1.5));
	const above: string[] = [];
	const below: string[] = [];
	for (let column = 0; column < columns; column++) {
		const from = Math.floor((column / columns) * length);
		const to = Math.max(from + 1, Math.floor(((column + 1) / columns) * length));
		let [low, high] = [0, 0];
		for (let i = from; i < to; i++) {
			low = Math.min(low, values[2 * i]);
			high = Math.max(high, values[2 * i + 1]);
		}
		const x = scale.x((from + to) / 2 / rate).toFixed(1);
		above.push(`${x} ${(height * (0.5 - 0.48 * high)).toFixed(1)}`);
		below.push(`${x} ${(height * (0.5 - 0.48 * low)).toFixed(1)}`);
	}
	return `M${above.join("L")}L${below.reverse().join("L")}Z`;
}
