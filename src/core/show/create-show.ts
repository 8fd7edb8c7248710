import { checkShowFile, toShow } from "./read-show.ts";
import { SHOW_FORMAT, SHOW_VERSION } from "./schema/show-file.ts";
import type { Show } from "./show.ts";

/** An empty show for a fleet of `drones`, every default in place. */
export function createShow(drones: number, title = ""): Show {
	return toShow(checkShowFile({ format: SHOW_FORMAT, version: SHOW_VERSION, title, fleet: { count: drones } }));
}
