import WaveSurfer from "wavesurfer.js";
import type { Analysis } from "../core/music/index.ts";
import type { BeatMap } from "../core/show/index.ts";

/** The style nonce that the page's content security policy grants to wavesurfer's shadow root. */
export const STYLE_NONCE = "staves";

/** Highest and lowest sample of each column of a row; columns are even in beats, as the row is. */
export interface BeatPeaks {
	readonly top: Float32Array;
	readonly bottom: Float32Array;
}

/**
 * Peaks of the soundtrack re-laid from seconds to beats, so that repeats stand under each other whatever the tempo does.
 * @param from @param to beats
 */
export function peaksOnBeats(
	peaks: Analysis["peaks"],
	beatMap: BeatMap,
	from: number,
	to: number,
	columns: number,
): BeatPeaks {
	const top = new Float32Array(columns);
	const bottom = new Float32Array(columns);
	const last = peaks.values.length / 2 - 1;
	const indexAt = (column: number) => beatMap.secondsAt(from + ((to - from) * column) / columns) * peaks.rate;
	let start = indexAt(0);
	for (let column = 0; column < columns; column++) {
		const stop = indexAt(column + 1);
		const first = Math.max(0, Math.floor(start));
		for (let i = first; i <= Math.min(last, Math.max(first, Math.ceil(stop) - 1)); i++) {
			bottom[column] = Math.min(bottom[column], peaks.values[2 * i]);
			top[column] = Math.max(top[column], peaks.values[2 * i + 1]);
		}
		start = stop;
	}
	return { top, bottom };
}

/** One row's waveform, drawn by wavesurfer from peaks; it plays nothing. */
export class Waveform {
	private surfer: WaveSurfer | null = null;
	private key = "";

	constructor(
		private readonly host: HTMLElement,
		private readonly colour: string,
	) {}

	/** @param key what the picture depends on; an equal key draws nothing anew */
	show(peaks: BeatPeaks, height: number, key: string): void {
		if (key === this.key) return;
		this.key = key;
		this.surfer?.destroy();
		this.surfer = WaveSurfer.create({
			container: this.host,
			height,
			waveColor: this.colour,
			peaks: [peaks.top, peaks.bottom],
			duration: 1,
			interact: false,
			cursorWidth: 0,
			hideScrollbar: true,
			cspNonce: STYLE_NONCE,
		});
	}

	clear(): void {
		this.key = "";
		this.surfer?.destroy();
		this.surfer = null;
	}
}
