import { createStore, type StoreApi } from "zustand/vanilla";
import type { Player } from "../platform/player.ts";
import type { BeatDrag, Commands, CueDrag, Drag } from "./commands/command-types.ts";
import { cueCommands } from "./commands/cue-commands.ts";
import { deskCommands } from "./commands/desk-commands.ts";
import { documentCommands } from "./commands/document-commands.ts";
import { formationCommands } from "./commands/formation-commands.ts";
import { gridCommands } from "./commands/grid-commands.ts";
import { newEditCommands } from "./commands/new-edit-commands.ts";
import { showCommands } from "./commands/show-commands.ts";
import { beginBeatDrag, beginCueDrag, beginDrag } from "./drag.ts";
import { createFeasibility } from "./feasibility.ts";
import { createInquiry } from "./inquiry.ts";
import { createJobLedger } from "./job-ledger.ts";
import { createKeeper } from "./keeper.ts";
import { createNewEdits } from "./new-edit.ts";
import { createNotices } from "./notices.ts";
import { setClicks } from "./open-show.ts";
import type { StudioParts } from "./parts.ts";
import { restore } from "./start.ts";
import type { StudioState } from "./studio-state.ts";
import { createWorkbench } from "./workbench.ts";

/** The whole program but its screens: what is known, what can be done, and the sound. */
export interface Studio {
	readonly store: StoreApi<StudioState>;
	readonly commands: Commands;
	readonly player: Player;
	/** @param name as undo names it: "Move cue 12". Null where edits are refused. */
	drag(name: string): Drag | null;
	dragBeat(beat: number): BeatDrag | null;
	dragCue(id: string, part: "departs" | "arrives" | "whole"): CueDrag | null;
	/** Brings back what was kept in the browser, else opens the demo show. Once, when the screens stand. */
	start(): Promise<void>;
	/** Settles when planning and checking have caught up with the show. */
	settled(): Promise<void>;
	/** Keeps what is waiting to be kept: the page is about to go. */
	flush(): Promise<void>;
	close(): Promise<void>;
}

export function createStudio(parts: StudioParts): Studio {
	const store = createStore<StudioState>(() => ({
		started: false,
		show: null,
		readOnly: null,
		fileName: null,
		unsaved: false,
		previous: null,
		audioReady: false,
		soundNotes: [],
		analysis: null,
		slots: null,
		ground: null,
		light: null,
		flight: null,
		check: null,
		care: null,
		flashes: [],
		unchecked: new Set(),
		inquired: null,
		newEdit: null,
		taps: null,
		afterEdit: null,
		playback: parts.player.state,
		selection: { kind: "nothing" },
		jobs: [],
		notices: [],
		undo: null,
		redo: null,
	}));
	const notices = createNotices(store);
	const ledger = createJobLedger(store);
	const keeper = createKeeper(store, notices);
	const { workers, player } = parts;
	const feasibility = createFeasibility({ store, workers, player, ledger, keeper, notices });
	const inquiry = createInquiry({ store, workers, ledger, notices });
	const bench = createWorkbench({ parts, store, notices, ledger, keeper, feasibility, inquiry });

	const edits = createNewEdits(bench);

	const unsubscribe = [
		player.subscribe((playback) => store.setState({ playback })),
		store.subscribe((state, before) => {
			if (state.show?.grid !== before.show?.grid && state.newEdit?.hears !== "new") setClicks(bench);
			if (state.show !== before.show) edits.follow(state.show, before.show);
		}),
	];
	const commands: Commands = {
		...showCommands(bench),
		...cueCommands(bench),
		...formationCommands(bench),
		...documentCommands(bench),
		...gridCommands(bench),
		...deskCommands(bench),
		...newEditCommands(bench, edits),
	};

	return {
		store,
		commands,
		player,
		drag: (name) => beginDrag(bench, name),
		dragBeat: (beat) => beginBeatDrag(bench, beat),
		dragCue: (id, part) => beginCueDrag(bench, id, part),
		start: async () => {
			let found = false;
			try {
				found = await restore(bench);
			} catch (error) {
				notices.sayError(error, "storage");
			}
			const { show, readOnly } = store.getState();
			// The desk is shown while the demo comes in, with its progress.
			store.setState({ started: true });
			if (!found && show === null && readOnly === null && parts.fetchDemo !== null) await commands.openDemo();
		},
		settled: async () => {
			await feasibility.settled();
			await inquiry.settled();
		},
		flush: () => keeper.flush(),
		close: async () => {
			for (const stop of unsubscribe) stop();
			await keeper.flush();
			ledger.cancelAll();
			workers.close();
			bench.lease?.release();
			await player.close();
		},
	};
}
