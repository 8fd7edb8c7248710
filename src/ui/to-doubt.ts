import type { Studio } from "../app/index.ts";
import { doubtfulPlaces } from "../core/music/index.ts";

/** The playhead goes to where the next stretch of doubtful beats begins; after the last, to the first again. */
export function toDoubt({ store, player, commands }: Studio): void {
	const { analysis, show } = store.getState();
	if (analysis === null || show === null) return;
	const places = doubtfulPlaces(show.grid, analysis);
	const here = player.heardAt(performance.now());
	const next = places.find((time) => time > here + 0.05) ?? places[0];
	if (next !== undefined) commands.seek(next);
}
