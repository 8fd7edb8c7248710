import type { Studio } from "../app/index.ts";
import { createBeatMap } from "../core/show/index.ts";

/** Splits the section under the ear at the bar line nearest to it. */
export function splitHere({ store, player, commands }: Studio): void {
	const { show } = store.getState();
	if (show === null) return;
	const beatMap = createBeatMap(show.grid);
	const here = beatMap.positionAt(player.heardAt(performance.now()));
	const { bar } = beatMap.barAt(here);
	const [start, next] = [beatMap.positionOf(bar), beatMap.positionOf(bar + 1)];
	const at = here - start <= next - here ? start : next;
	const section = show.sections.find((one) => at > one.from && at < one.to);
	if (section) commands.splitSection(section.id, at);
}
