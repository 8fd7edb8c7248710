import type { Studio } from "../app/index.ts";
import { DOUBTFUL } from "../core/music/index.ts";

/** The playhead goes to where the next stretch of doubtful beats begins; after the last, to the first again. */
export function toDoubt({ store, player, commands }: Studio): void {
	const { analysis } = store.getState();
	if (analysis === null) return;
	const { beats, beatConfidence } = analysis;
	const starts: number[] = [];
	for (let k = 0; k < beats.length; k++) {
		if (beatConfidence[k] < DOUBTFUL && (k === 0 || beatConfidence[k - 1] >= DOUBTFUL)) starts.push(beats[k]);
	}
	const here = player.heardAt(performance.now());
	const next = starts.find((time) => time > here + 0.05) ?? starts[0];
	if (next !== undefined) commands.seek(next);
}
