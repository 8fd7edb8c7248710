import type { Studio } from "../app/index.ts";
import { createBeatMap, cuePosition, cuesInTime } from "../core/show/index.ts";
import { cueActions } from "./cue-actions.ts";
import { desk, type MarginPage } from "./desk.ts";
import type { FrameLoop } from "./frame-loop.ts";
import { loopSection } from "./loop-section.ts";
import { splitHere } from "./split-section.ts";
import { toDoubt } from "./to-doubt.ts";
import { zoomStrip } from "./zoom-strip.ts";

/** Everything that can be done without pointing: one list for the menu, the command finder and the keyboard. */
export interface Action {
	readonly id: string;
	readonly name: string;
	/** As the help shows it: "Ctrl+S". Several are parted by " or ". */
	readonly keys?: string;
	/** Heading in the menu and the list of keys. */
	readonly theme: "Show" | "Edit" | "Music" | "Cues" | "View";
	readonly available?: () => boolean;
	readonly run: () => void;
}

export interface ActionParts {
	readonly studio: Studio;
	readonly loop: FrameLoop;
	/** Opens the browser's file dialog: for anything, or for a new edit of the soundtrack. */
	readonly chooseFile: () => void;
	readonly chooseEdit: () => void;
}

export function listActions(parts: ActionParts): Action[] {
	const { studio } = parts;
	const { commands, store } = studio;
	const hasShow = () => store.getState().show !== null;
	const canEdit = () => hasShow() && store.getState().readOnly === null;
	const page = (margin: MarginPage) => () => desk.setState({ margin });
	const show: Action[] = [
		{ id: "open", name: "Open a soundtrack or a show …", keys: "Ctrl+O", theme: "Show", run: parts.chooseFile },
		{
			id: "save",
			name: "Save the show",
			keys: "Ctrl+S",
			theme: "Show",
			available: hasShow,
			run: () => void commands.save(),
		},
		{
			id: "save-with-soundtrack",
			name: "Save show and soundtrack in one file",
			theme: "Show",
			available: hasShow,
			run: () => void commands.save({ as: true, withSoundtrack: true }),
		},
		{ id: "new", name: "New show without music", theme: "Show", run: () => commands.newShow(100) },
		{ id: "demo", name: "Open the demo show", theme: "Show", run: () => void commands.openDemo() },
		{
			id: "previous",
			name: "Bring back the show before this one",
			theme: "Show",
			available: () => store.getState().previous !== null,
			run: () => void commands.bringBackPrevious(),
		},
		{
			id: "new-edit",
			name: "New edit of the music …",
			keys: "E",
			theme: "Show",
			available: () => canEdit() && store.getState().audioReady && store.getState().newEdit === null,
			run: parts.chooseEdit,
		},
		{
			id: "rough-cut",
			name: "Make a rough cut …",
			theme: "Show",
			available: () => canEdit() && store.getState().analysis !== null,
			run: () => desk.setState({ asksRoughCut: true }),
		},
		{ id: "tray", name: "Tray", keys: "Shift+7", theme: "Show", available: hasShow, run: page("tray") },
		{ id: "hand-off", name: "Hand-off …", keys: "Shift+5", theme: "Show", available: hasShow, run: page("hand-off") },
	];
	const edit: Action[] = [
		{
			id: "undo",
			name: "Undo",
			keys: "Ctrl+Z",
			theme: "Edit",
			available: () => store.getState().undo !== null,
			run: () => commands.undo(),
		},
		{
			id: "redo",
			name: "Redo",
			keys: "Ctrl+Shift+Z or Ctrl+Y",
			theme: "Edit",
			available: () => store.getState().redo !== null,
			run: () => commands.redo(),
		},
		{ id: "finder", name: "Find a command", keys: "Ctrl+K", theme: "Edit", run: () => desk.setState({ finder: true }) },
		{ id: "keys", name: "Show all keys", keys: "?", theme: "Edit", run: () => desk.setState({ keysShown: true }) },
		{
			id: "check",
			name: "Check the whole show again",
			theme: "Edit",
			available: canEdit,
			run: () => commands.checkAgain(),
		},
	];
	const view: Action[] = [
		{
			id: "strip",
			name: "Page view or strip",
			keys: "V",
			theme: "View",
			available: hasShow,
			run: () => zoomStrip(parts, "toggle"),
		},
		{ id: "zoom-in", name: "Zoom in", keys: "+", theme: "View", available: hasShow, run: () => zoomStrip(parts, 0.6) },
		{
			id: "zoom-out",
			name: "Zoom out",
			keys: "-",
			theme: "View",
			available: hasShow,
			run: () => zoomStrip(parts, 1 / 0.6),
		},
		{
			id: "view-audience",
			name: "See it from the audience",
			keys: "1",
			theme: "View",
			run: () => desk.setState({ viewpoint: "audience" }),
		},
		{
			id: "view-plan",
			name: "See it in plan",
			keys: "2",
			theme: "View",
			run: () => desk.setState({ viewpoint: "plan" }),
		},
		{
			id: "view-elevation",
			name: "See it in elevation",
			keys: "3",
			theme: "View",
			run: () => desk.setState({ viewpoint: "elevation" }),
		},
		{
			id: "view-free",
			name: "Go round it freely",
			keys: "4",
			theme: "View",
			run: () => desk.setState({ viewpoint: "free" }),
		},
		{
			id: "unlit",
			name: "Show or hide unlit drones",
			keys: "U",
			theme: "View",
			run: () => desk.setState({ showUnlit: !desk.getState().showUnlit }),
		},
		{ id: "detail", name: "Detail", keys: "Shift+1", theme: "View", run: page("detail") },
		{ id: "verdicts", name: "Verdicts", keys: "Shift+2", theme: "View", available: hasShow, run: page("verdicts") },
		{ id: "care", name: "Care", keys: "Shift+6", theme: "View", available: hasShow, run: page("care") },
		{
			id: "formations",
			name: "Formations",
			keys: "Shift+3",
			theme: "View",
			available: hasShow,
			run: page("formations"),
		},
		{
			id: "fleet-venue",
			name: "Fleet & venue",
			keys: "Shift+4",
			theme: "View",
			available: hasShow,
			run: page("fleet-venue"),
		},
	];
	return [...show, ...edit, ...musicActions(parts, hasShow, canEdit), ...cueActions(parts, canEdit), ...view];
}

function musicActions({ studio }: ActionParts, hasShow: () => boolean, canEdit: () => boolean): Action[] {
	const { commands, store } = studio;
	const beatMap = () => createBeatMap(store.getState().show?.grid ?? { beats: [], bars: [] });
	const step = (beats: number, toBar: boolean) => () => {
		const map = beatMap();
		const position = map.positionAt(studio.player.heardAt(performance.now()));
		const ahead = beats > 0;
		let target = ahead ? Math.floor(position + 1e-3) + 1 : Math.ceil(position - 1e-3) - 1;
		if (toBar) {
			const { bar, beat } = map.barAt(position + (ahead ? 1e-3 : -1e-3));
			target = map.positionOf(ahead ? bar + 1 : beat > 1 ? bar : bar - 1);
		}
		commands.seek(map.secondsAt(target));
	};
	const toCue = (direction: 1 | -1) => () => {
		const show = store.getState().show;
		if (!show) return;
		const map = beatMap();
		const cues = cuesInTime(show, map);
		if (cues.length === 0) return;
		const { selection } = store.getState();
		const current = selection.kind === "cues" ? cues.findIndex((cue) => cue.id === selection.ids.at(-1)) : -1;
		const here = map.positionAt(studio.player.heardAt(performance.now()));
		const nearest =
			direction > 0
				? cues.findIndex((cue) => cuePosition(cue, map) >= here - 1e-6)
				: cues.findLastIndex((cue) => cuePosition(cue, map) <= here + 1e-6);
		const index = current >= 0 ? current + direction : nearest >= 0 ? nearest : direction > 0 ? cues.length - 1 : 0;
		const cue = cues[Math.min(cues.length - 1, Math.max(0, index))];
		commands.selectCue(cue.id);
		// As a click on it does: what was selected is shown.
		desk.setState({ margin: "detail" });
		commands.seek(map.secondsAt(cuePosition(cue, map)));
	};
	const positionHere = () => beatMap().positionAt(studio.player.heardAt(performance.now()));
	const nudge = (seconds: number) => {
		const beat = beatHere();
		const at = store.getState().show?.grid.beats[beat];
		if (at === undefined || !commands.moveBeat(beat, at + seconds)) return;
		// The ear goes with it, so that the next press moves the same beat.
		if (!store.getState().playback.playing) commands.seek(at + seconds);
	};
	const beatHere = () => Math.round(beatMap().positionAt(studio.player.heardAt(performance.now())));
	return [
		{
			id: "play",
			name: "Play or pause",
			keys: "Space",
			theme: "Music",
			available: hasShow,
			run: () => (store.getState().playback.playing ? commands.pause() : void commands.play()),
		},
		{
			id: "hear-other",
			name: "Hear the other edit at the same place",
			keys: "X",
			theme: "Music",
			available: () => store.getState().newEdit !== null,
			run: () => void commands.hearEdit(store.getState().newEdit?.hears === "old" ? "new" : "old"),
		},
		{
			id: "to-start",
			name: "To the start of the music",
			keys: "Home",
			theme: "Music",
			available: hasShow,
			run: () => commands.seek(0),
		},
		{ id: "beat-on", name: "One beat on", keys: "Right", theme: "Music", available: hasShow, run: step(1, false) },
		{ id: "beat-back", name: "One beat back", keys: "Left", theme: "Music", available: hasShow, run: step(-1, false) },
		{ id: "bar-on", name: "One bar on", keys: "Shift+Right", theme: "Music", available: hasShow, run: step(1, true) },
		{
			id: "bar-back",
			name: "One bar back",
			keys: "Shift+Left",
			theme: "Music",
			available: hasShow,
			run: step(-1, true),
		},
		{ id: "next-cue", name: "Next cue", keys: "Down", theme: "Music", available: hasShow, run: toCue(1) },
		{ id: "previous-cue", name: "Cue before", keys: "Up", theme: "Music", available: hasShow, run: toCue(-1) },
		{
			id: "click",
			name: "Click track on or off",
			keys: "K",
			theme: "Music",
			available: hasShow,
			run: () => commands.setClick(!store.getState().playback.click),
		},
		{
			id: "loop",
			name: "Loop this section, or stop looping",
			keys: "L",
			theme: "Music",
			available: hasShow,
			run: () => loopSection(studio),
		},
		{
			id: "downbeat",
			name: "A bar begins at this beat",
			keys: "B",
			theme: "Music",
			available: canEdit,
			run: () => commands.setDownbeat(beatHere()),
		},
		{
			id: "metre",
			name: "Metre from this beat on …",
			theme: "Music",
			available: canEdit,
			run: () => desk.setState({ asksMetre: true }),
		},
		{
			id: "tap",
			name: "Tap a beat along with the music",
			keys: "J",
			theme: "Music",
			available: canEdit,
			run: () => {
				if (!store.getState().playback.playing) void commands.play();
				commands.tapBeat();
			},
		},
		{
			id: "beat-earlier",
			name: "This beat 10 ms earlier",
			keys: ",",
			theme: "Music",
			available: canEdit,
			run: () => nudge(-0.01),
		},
		{
			id: "beat-later",
			name: "This beat 10 ms later",
			keys: ".",
			theme: "Music",
			available: canEdit,
			run: () => nudge(0.01),
		},
		{
			id: "beat-hair-earlier",
			name: "This beat 1 ms earlier",
			keys: "Shift+,",
			theme: "Music",
			available: canEdit,
			run: () => nudge(-0.001),
		},
		{
			id: "beat-hair-later",
			name: "This beat 1 ms later",
			keys: "Shift+.",
			theme: "Music",
			available: canEdit,
			run: () => nudge(0.001),
		},
		{
			id: "insert-beat",
			name: "Put a beat in after this one",
			theme: "Music",
			available: canEdit,
			run: () => commands.insertBeat(Math.floor(positionHere() + 1e-3)),
		},
		{
			id: "delete-beat",
			name: "Take this beat out",
			theme: "Music",
			available: canEdit,
			run: () => commands.deleteBeat(beatHere()),
		},
		{
			id: "doubtful",
			name: "To the next doubtful place",
			keys: "D",
			theme: "Music",
			available: () => store.getState().analysis !== null,
			run: () => toDoubt(studio),
		},
		{
			id: "double",
			name: "Twice as many beats",
			theme: "Music",
			available: canEdit,
			run: () => commands.doubleBeats(),
		},
		{ id: "halve", name: "Half as many beats", theme: "Music", available: canEdit, run: () => commands.halveBeats() },
		{
			id: "earlier",
			name: "All beats 5 ms earlier",
			theme: "Music",
			available: canEdit,
			run: () => commands.shiftBeats(-0.005),
		},
		{
			id: "later",
			name: "All beats 5 ms later",
			theme: "Music",
			available: canEdit,
			run: () => commands.shiftBeats(0.005),
		},
		{
			id: "split-section",
			name: "Split the section at this bar",
			theme: "Music",
			available: canEdit,
			run: () => splitHere(studio),
		},
		{
			id: "coarser-sections",
			name: "Coarser sections",
			theme: "Music",
			available: () => canEdit() && store.getState().analysis !== null,
			run: () => commands.divideSections(-1),
		},
		{
			id: "finer-sections",
			name: "Finer sections",
			theme: "Music",
			available: () => canEdit() && store.getState().analysis !== null,
			run: () => commands.divideSections(1),
		},
		{
			id: "analysed-grid",
			name: "Take beats and sections as they were heard",
			theme: "Music",
			available: () => canEdit() && store.getState().analysis !== null,
			run: () => commands.takeAnalysedGrid(),
		},
	];
}
