import { createBeatMap } from "../core/show/index.ts";
import type { Action, ActionParts } from "./actions.ts";

/** What is done to the selected cues, or puts new ones in where the ear is. */
export function cueActions({ studio }: ActionParts, canEdit: () => boolean): Action[] {
	const { commands, store } = studio;
	const selected = (): readonly string[] => {
		const { selection } = store.getState();
		return selection.kind === "cues" ? selection.ids : [];
	};
	const hasCues = () => canEdit() && selected().length > 0;
	const here = () =>
		Math.round(
			createBeatMap(store.getState().show?.grid ?? { beats: [], bars: [] }).positionAt(
				studio.player.heardAt(performance.now()),
			),
		);
	const only = () => {
		const [id, ...others] = selected();
		const cue = id === undefined || others.length > 0 ? undefined : store.getState().show?.cues.byId[id];
		return cue?.kind === "transition" ? cue : null;
	};
	const arrive = (beats: number) => () => {
		const cue = only();
		if (cue) commands.changeCue(cue.id, { length: Math.max(0.25, cue.length + beats) });
	};
	const depart = (beats: number) => () => {
		const cue = only();
		if (cue) commands.changeCue(cue.id, { at: cue.at + beats, length: Math.max(0.25, cue.length - beats) });
	};
	const hasTransition = () => canEdit() && only() !== null;
	const hasFormation = () => canEdit() && (store.getState().show?.formations.order.length ?? 0) > 0;
	return [
		{
			id: "add-transition",
			name: "Put in a transition here",
			keys: "T",
			theme: "Cues",
			available: hasFormation,
			run: () => {
				const show = store.getState().show;
				const formation = show?.formations.order[0];
				if (formation) commands.addCue({ kind: "transition", at: here(), length: 8, formation });
			},
		},
		{
			id: "add-colour",
			name: "Put in a colour cue here",
			keys: "C",
			theme: "Cues",
			available: canEdit,
			run: () =>
				void commands.addCue({ kind: "colour", at: here(), fade: 1, paint: { kind: "flat", colour: "#f3d9a4" } }),
		},
		{
			id: "add-intensity",
			name: "Put in an intensity cue here",
			keys: "I",
			theme: "Cues",
			available: canEdit,
			run: () => void commands.addCue({ kind: "intensity", at: here(), fade: 2, level: 0.8 }),
		},
		{
			id: "move-on",
			name: "Move by a beat: later",
			keys: "Alt+Right",
			theme: "Cues",
			available: hasCues,
			run: () => commands.moveCues(selected(), 1),
		},
		{
			id: "move-back",
			name: "Move by a beat: earlier",
			keys: "Alt+Left",
			theme: "Cues",
			available: hasCues,
			run: () => commands.moveCues(selected(), -1),
		},
		{
			id: "arrive-later",
			name: "Arrive one beat later",
			keys: "Alt+Shift+Right",
			theme: "Cues",
			available: hasTransition,
			run: arrive(1),
		},
		{
			id: "arrive-earlier",
			name: "Arrive one beat earlier",
			keys: "Alt+Shift+Left",
			theme: "Cues",
			available: hasTransition,
			run: arrive(-1),
		},
		{
			id: "depart-later",
			name: "Depart one beat later",
			keys: "Alt+Shift+Up",
			theme: "Cues",
			available: hasTransition,
			run: depart(1),
		},
		{
			id: "depart-earlier",
			name: "Depart one beat earlier",
			keys: "Alt+Shift+Down",
			theme: "Cues",
			available: hasTransition,
			run: depart(-1),
		},
		{
			id: "copy",
			name: "Copy the cues to where the ear is",
			keys: "Ctrl+D",
			theme: "Cues",
			available: hasCues,
			run: () => void commands.copyCues(selected(), here()),
		},
		{
			id: "remove",
			name: "Remove the cues",
			keys: "Delete",
			theme: "Cues",
			available: hasCues,
			run: () => commands.removeCues(selected()),
		},
		{
			id: "clear",
			name: "Select nothing",
			keys: "Escape",
			theme: "Cues",
			run: () => commands.select({ kind: "nothing" }),
		},
	];
}
