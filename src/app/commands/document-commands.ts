import {
	removeDroneGroup,
	setDroneGroup,
	setFleet,
	setLimits,
	setNotes,
	setTakeoff,
	setTitle,
	setVenue,
} from "../../core/show/index.ts";
import type { Workbench } from "../workbench.ts";
import type { DocumentCommands } from "./command-types.ts";

/** Edits of what stands in the show once: title, fleet, venue, take-off grid. */
export function documentCommands(bench: Workbench): DocumentCommands {
	return {
		setTitle: (title) => bench.edit("Change the title", (draft) => setTitle(draft, title)) !== null,
		setNotes: (notes) => bench.edit("Change the notes", (draft) => setNotes(draft, notes)) !== null,
		setFleet: (change) => bench.edit("Change the fleet", (draft) => setFleet(draft, change)) !== null,
		setLimits: (change) => bench.edit("Change the limits", (draft) => setLimits(draft, change)) !== null,
		setVenue: (change) => bench.edit("Change the venue", (draft) => setVenue(draft, change)) !== null,
		setTakeoff: (takeoff) => bench.edit("Change the take-off grid", (draft) => setTakeoff(draft, takeoff)) !== null,
		setDroneGroup: (group) => bench.edit(`Change group ${group.name}`, (draft) => setDroneGroup(draft, group)) !== null,
		removeDroneGroup: (id) => bench.edit("Remove group", (draft) => removeDroneGroup(draft, id)) !== null,
	};
}
