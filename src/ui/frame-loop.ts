import type { Studio } from "../app/index.ts";

/** Called at each frame with the second that is heard; `moved` is false while the music stands still. */
export type FrameListener = (seconds: number, moved: boolean) => void;

/** The screens' one animation loop: staves, night view and readout are told the same instant. */
export class FrameLoop {
	private readonly listeners = new Set<FrameListener>();
	private frame = 0;
	private last = Number.NaN;

	constructor(private readonly studio: Studio) {}

	start(): void {
		const step = (time: number) => {
			const seconds = this.studio.player.heardAt(time);
			const moved = seconds !== this.last;
			this.last = seconds;
			for (const listener of this.listeners) listener(seconds, moved);
			this.frame = requestAnimationFrame(step);
		};
		this.frame = requestAnimationFrame(step);
	}

	stop(): void {
		cancelAnimationFrame(this.frame);
	}

	listen(listener: FrameListener): () => void {
		this.listeners.add(listener);
		return () => this.listeners.delete(listener);
	}

	/** Second of the frame that was drawn last. */
	get now(): number {
		return Number.isNaN(this.last) ? 0 : this.last;
	}
}
