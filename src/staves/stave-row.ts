import type { Analysis } from "../core/music/index.ts";
import { drawRow, type RowPicture } from "./draw-row.ts";
import { peaksOnBeats, Waveform } from "./waveform.ts";

/** One line of the staves in the page: its head, its waveform and the canvas over it. */
export class StaveRow {
	readonly element = document.createElement("div");
	readonly body = document.createElement("div");
	private readonly head = document.createElement("button");
	private readonly letter = document.createElement("span");
	private readonly bar = document.createElement("span");
	private readonly name = document.createElement("div");
	private readonly wave = document.createElement("div");
	private readonly canvas = document.createElement("canvas");
	private readonly waveform: Waveform;
	picture: RowPicture | null = null;

	constructor(waveColour: string, onHead: () => void) {
		this.element.className = "stave-row";
		this.head.className = "stave-head";
		this.head.type = "button";
		this.letter.className = "stave-letter";
		this.bar.className = "stave-bar";
		this.name.className = "stave-name";
		this.body.className = "stave-body";
		this.wave.className = "stave-wave";
		this.canvas.className = "stave-lanes";
		// Seen: "A" over "1"; heard: "A, from bar 1".
		const between = document.createElement("span");
		between.className = "unseen";
		between.textContent = ", from bar ";
		this.head.append(this.letter, between, this.bar);
		this.body.append(this.wave, this.canvas, this.name);
		this.element.append(this.head, this.body);
		this.head.addEventListener("click", onHead);
		this.waveform = new Waveform(this.wave, waveColour);
	}

	/** Sets size and words; what is drawn follows with `draw`. */
	lay(picture: RowPicture, selected: boolean): void {
		this.picture = picture;
		const { row, lanes, width } = picture;
		this.letter.textContent = row.letter;
		this.bar.textContent = String(row.bar);
		this.name.textContent = row.name;
		this.head.setAttribute("aria-pressed", String(selected));
		this.head.disabled = row.section === null;
		this.body.style.width = `${width}px`;
		this.body.style.height = `${lanes.height}px`;
		this.wave.style.top = `${lanes.waveTop}px`;
		this.wave.style.height = `${lanes.waveHeight}px`;
	}

	draw(analysis: Analysis | null, musicKey: string): void {
		const picture = this.picture;
		if (!picture) return;
		const { row, lanes, width, beatMap } = picture;
		if (analysis) {
			const columns = Math.max(1, Math.round(width));
			const key = `${musicKey} ${row.from} ${row.to} ${columns} ${lanes.waveHeight}`;
			this.waveform.show(peaksOnBeats(analysis.peaks, beatMap, row.from, row.to, columns), lanes.waveHeight, key);
		} else this.waveform.clear();
		const ratio = Math.min(2, window.devicePixelRatio || 1);
		const [wide, high] = [Math.round((width + 4) * ratio), Math.round(lanes.height * ratio)];
		if (this.canvas.width !== wide || this.canvas.height !== high) {
			this.canvas.width = wide;
			this.canvas.height = high;
			this.canvas.style.width = `${width + 4}px`;
			this.canvas.style.height = `${lanes.height}px`;
		}
		const pen = this.canvas.getContext("2d");
		if (pen) drawRow(pen, picture, ratio);
	}

	destroy(): void {
		this.waveform.clear();
		this.element.remove();
	}
}
