import type { Studio } from "../app/index.ts";
import { createBeatMap } from "../core/show/index.ts";

/** Loops the section that is heard now; where something loops already, stops looping. */
export function loopSection({ store, commands, player }: Studio): void {
	const { playback, show } = store.getState();
	if (playback.loop) {
		commands.setLoop(null);
		return;
	}
	if (!show) return;
	const map = createBeatMap(show.grid);
	const position = map.positionAt(player.heardAt(performance.now()));
	const section = show.sections.find((one) => position >= one.from && position < one.to);
	if (section) commands.setLoop({ from: map.secondsAt(section.from), to: map.secondsAt(section.to) });
}
