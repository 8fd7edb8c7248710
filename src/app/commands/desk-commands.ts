import { followSoundtrack } from "../new-edit.ts";
import type { Workbench } from "../workbench.ts";
import type { DeskCommands } from "./command-types.ts";

/** What changes nothing in the show: selection, undo, notices, playing. */
export function deskCommands(bench: Workbench): DeskCommands {
	const { store, notices, ledger } = bench;
	const { player } = bench.parts;
	/** Undo may bring back a show with another soundtrack: the sound follows. */
	const walk = (direction: "undo" | "redo"): boolean => {
		const walked = bench.walk(direction);
		if (walked) void followSoundtrack(bench).catch((error) => notices.sayError(error));
		return walked;
	};
	return {
		select: (selection) => store.setState({ selection }),
		selectCue: (id, add = false) => {
			const { selection } = store.getState();
			const held = add && selection.kind === "cues" ? selection.ids : [];
			const ids = held.includes(id) ? held.filter((other) => other !== id) : [...held, id];
			store.setState({ selection: ids.length > 0 ? { kind: "cues", ids } : { kind: "nothing" } });
		},
		undo: () => walk("undo"),
		redo: () => walk("redo"),
		lookInto: (part) => bench.inquiry.lookInto(part),
		dismissNotice: (id) => notices.dismiss(id),
		cancelJob: (id) => ledger.cancel(id),
		play: async () => {
			try {
				await player.play();
			} catch (error) {
				notices.sayError(error);
			}
		},
		pause: () => player.pause(),
		seek: (seconds) => player.seek(seconds),
		setRate: (rate) => player.setRate(rate),
		setLoop: (loop) => player.setLoop(loop),
		setClick: (on) => player.setClick(on),
	};
}
