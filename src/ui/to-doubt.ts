import type { Studio } from "../app/index.ts";
import { doubtfulBeats } from "../core/music/index.ts";

/** The playhead goes to where the next stretch of doubtful beats begins; after the last, to the first again. */
export function toDoubt({ store, player, commands }: Studio): void {
	const { analysis, show } = store.getState();
	if (analysis === null || show === null) return;
	const doubtful = doubtfulBeats(show.grid, analysis);
	const starts = doubtful.filter((beat, k) => beat - 1 !== doubtful[k - 1]).map((beat) => show.grid.beats[beat]);
	const here = player.heardAt(performance.now());
	const next = starts.find((time) => time > here + 0.05) ?? starts[0];
	if (next !== undefined) commands.seek(next);
}
