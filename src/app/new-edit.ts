import type { Analysis } from "../core/music/index.ts";
import {
	type AnchorPair,
	compareTransitions,
	type EditMap,
	moveEdge,
	type RetimeChoices,
	type RetimeReceipt,
	type RetimeResult,
	retimeShow,
	settleRetime,
	toNew,
	toOld,
} from "../core/retime/index.ts";
import { applyEdit, type Show, type Soundtrack } from "../core/show/index.ts";
import { StarstaveError } from "../core/units/index.ts";
import type { NamedBytes } from "../platform/files.ts";
import type { JobAnswer } from "../workers/index.ts";
import { hear, setClicks, takeSound } from "./open-show.ts";
import type { Workbench } from "./workbench.ts";

/** A new edit of the soundtrack that is being looked at; the show itself is untouched until it is taken over. */
export interface NewEdit {
	readonly soundtrack: Soundtrack;
	/** Of the new soundtrack. */
	readonly analysis: Analysis;
	readonly map: EditMap;
	readonly result: RetimeResult;
	readonly choices: RetimeChoices;
	readonly receipt: RetimeReceipt;
	/** Pairs that the designer has set, and how many of the designer's corrections can be taken back. */
	readonly anchors: readonly AnchorPair[];
	readonly corrections: number;
	/** Which of the two soundtracks is played. */
	readonly hears: "old" | "new";
}

/** What a retime that was taken over has come to, as long as it stands. */
export interface AfterEdit {
	/** Base name of the soundtrack before. */
	readonly from: string;
	readonly receipt: RetimeReceipt;
	/** Ids of transitions that flew before. */
	readonly flewBefore: ReadonlySet<string>;
}

type Heard = JobAnswer<"analyse">;
/** A soundtrack with all that was heard in it. */
export interface KnownSound {
	readonly file: NamedBytes;
	readonly heard: Heard;
}

/** What stands behind the new edit that is being looked at. */
interface Session {
	readonly old: KnownSound;
	readonly current: KnownSound;
	/** Maps before each correction, the last one last. */
	readonly before: { readonly map: EditMap; readonly anchors: readonly AnchorPair[] }[];
}

export interface NewEdits {
	open(file: NamedBytes): Promise<boolean>;
	moveEdge(index: number, edge: "start" | "end", seconds: number): void;
	setAnchor(pair: AnchorPair): Promise<boolean>;
	takeBack(): boolean;
	choose(change: Partial<RetimeChoices>): void;
	listen(to: "old" | "new"): Promise<void>;
	accept(): Promise<boolean>;
	drop(): Promise<void>;
	/** The show has changed under it. */
	follow(show: Show | null, before: Show | null): void;
}

const NONE: RetimeChoices = { looked: new Set(), tray: new Set(), offers: new Set() };

export function createNewEdits(bench: Workbench): NewEdits {
	const { store, notices, ledger, parts, history } = bench;
	let session: Session | null = null;

	const work = (show: Show, soundtrack: Soundtrack, analysis: Analysis, map: EditMap, choices: RetimeChoices) => {
		const result = retimeShow(show, map, soundtrack, analysis);
		return { map, result, choices, receipt: compareTransitions(show, settleRetime(result, choices)) };
	};
	/** Works the retime out anew after anything it hangs on has changed. */
	const renew = (change: Partial<Pick<NewEdit, "map" | "choices" | "anchors">>): void => {
		const { newEdit, show } = store.getState();
		if (newEdit === null || show === null || session === null) return;
		const { soundtrack, analysis } = newEdit;
		const map = change.map ?? newEdit.map;
		const choices = change.choices ?? newEdit.choices;
		store.setState({
			newEdit: {
				...newEdit,
				...work(show, soundtrack, analysis, map, choices),
				anchors: change.anchors ?? newEdit.anchors,
				corrections: session.before.length,
			},
		});
	};
	const findMap = (old: Heard, current: Heard, show: Show, anchors: readonly AnchorPair[]): Promise<EditMap> =>
		ledger.run("Finding what went where", (signal, onProgress) => {
			const { beats, bars } = show.grid;
			const ask = {
				old: old.samples,
				current: current.samples,
				anchors,
				beats,
				downbeats: bars.map((bar) => beats[bar.beat]),
			};
			return parts.workers.run("mapEdit", ask, { signal, onProgress });
		});
	const close = (): void => {
		session = null;
		store.setState({ newEdit: null });
	};

	return {
		open: async (file) => {
			const { show } = store.getState();
			if (show?.soundtrack == null || bench.soundtrack === null) {
				const which = show?.soundtrack == null ? "a soundtrack" : show.soundtrack.file;
				throw new StarstaveError(
					"soundtrack",
					`A new edit is held against the soundtrack that the show was made for: open ${which} first.`,
				);
			}
			const oldFile = bench.soundtrack;
			const old = await hear(bench, oldFile, show.soundtrack.sha256);
			const current = await hear(bench, file, null);
			if (current.soundtrack.sha256 === show.soundtrack.sha256) {
				notices.say("caution", `${file.name} is the very soundtrack that the show has, so there is nothing to move.`);
				return false;
			}
			const map = await findMap(old, current, show, []);
			if (store.getState().show?.soundtrack?.sha256 !== show.soundtrack.sha256) return false;
			if (map.verdict === "different") {
				throw new StarstaveError(
					"soundtrack",
					`${[`${file.name} is another piece of music than ${show.soundtrack.file}, so nothing was moved.`, ...map.notes].join(" ")}`,
				);
			}
			session = { old: { file: oldFile, heard: old }, current: { file, heard: current }, before: [] };
			const { soundtrack, analysis } = current;
			const now = store.getState().show ?? show;
			store.setState({
				newEdit: {
					soundtrack,
					analysis,
					...work(now, soundtrack, analysis, map, NONE),
					anchors: [],
					corrections: 0,
					hears: "old",
				},
			});
			return true;
		},
		moveEdge: (index, edge, seconds) => {
			const { newEdit } = store.getState();
			if (newEdit === null || session === null) return;
			const map = moveEdge(newEdit.map, index, edge, seconds);
			session.before.push({ map: newEdit.map, anchors: newEdit.anchors });
			renew({ map });
		},
		setAnchor: async (pair) => {
			const { newEdit, show } = store.getState();
			if (newEdit === null || show === null || session === null) return false;
			const { map: found, anchors: known } = newEdit;
			if (!(pair.old >= 0 && pair.old <= found.oldDuration && pair.new >= 0 && pair.new <= found.newDuration)) {
				throw new StarstaveError(
					"soundtrack",
					`A pair of places lies within both soundtracks: the old one lasts ${found.oldDuration.toFixed(1)} s, the new one ${found.newDuration.toFixed(1)} s.`,
				);
			}
			const anchors = [...known.filter((one) => Math.abs(one.new - pair.new) > 0.5), pair];
			const asked = session;
			const map = await findMap(session.old.heard, session.current.heard, show, anchors);
			if (session !== asked) return false;
			session.before.push({ map: found, anchors: known });
			renew({ map, anchors });
			return true;
		},
		takeBack: () => {
			const last = session?.before.pop();
			if (last === undefined) return false;
			renew(last);
			return true;
		},
		choose: (change) => {
			const { newEdit } = store.getState();
			if (newEdit !== null) renew({ choices: { ...newEdit.choices, ...change } });
		},
		listen: async (to) => {
			const { newEdit, playback, show } = store.getState();
			if (newEdit === null || session === null || show === null || newEdit.hears === to) return;
			const at = parts.player.heardAt(performance.now());
			const seconds = to === "new" ? toNew(newEdit.map, at) : toOld(newEdit.map, at);
			const { samples } = (to === "new" ? session.current : session.old).heard;
			store.setState({ newEdit: { ...newEdit, hears: to } });
			await parts.player.load(samples);
			const { grid } = to === "new" ? newEdit.result.show : show;
			parts.player.setClicks({ beats: grid.beats, barStarts: new Set(grid.bars.map((bar) => bar.beat)) });
			if (to === "new") parts.player.setSpan(0, newEdit.soundtrack.duration);
			else bench.feasibility.refresh();
			parts.player.seek(seconds);
			if (playback.playing) await parts.player.play();
		},
		accept: async () => {
			const { newEdit, show, check } = store.getState();
			if (newEdit === null || show === null || session === null || !bench.mayEdit()) return false;
			bench.endDrag();
			const settled = settleRetime(newEdit.result, newEdit.choices);
			const edit = applyEdit(show, (draft) => {
				const { soundtrack, grid, sections, cues, retimedFrom, orphans, review } = settled;
				Object.assign(draft, { soundtrack, grid, sections, cues, retimedFrom });
				for (const [key, list] of Object.entries({ orphans, review })) {
					if (list === undefined) delete draft[key as "orphans" | "review"];
					else Object.assign(draft, { [key]: list });
				}
			});
			const flies = check?.transitions.filter((one) => one.verdicts.includes("flies")) ?? [];
			const flewBefore = new Set(flies.map((one) => one.id));
			const afterEdit = {
				from: show.soundtrack?.file ?? "",
				receipt: compareTransitions(show, edit.show),
				flewBefore,
			};
			const { old, current } = session;
			for (const sound of [old, current]) bench.sounds.set(sound.heard.soundtrack.sha256, sound);
			session = null;
			history.push("Take over the new edit", edit);
			store.setState({ show: edit.show, unsaved: true, newEdit: null, afterEdit });
			bench.showChanged({ keep: true });
			await takeSound(bench, current.file, current.heard);
			return true;
		},
		drop: async () => {
			const { newEdit, playback } = store.getState();
			const sound = session?.old.heard.samples;
			const hears = newEdit?.hears;
			const at = newEdit === null ? 0 : toOld(newEdit.map, parts.player.heardAt(performance.now()));
			close();
			if (hears !== "new" || sound === undefined) return;
			await parts.player.load(sound);
			setClicks(bench);
			bench.feasibility.refresh();
			parts.player.seek(at);
			if (playback.playing) await parts.player.play();
		},
		follow: (show, before) => {
			if (store.getState().newEdit === null) session = null;
			if (session === null) return;
			if (show?.soundtrack?.sha256 !== before?.soundtrack?.sha256) close();
			else renew({});
		},
	};
}

/** After undo or redo the sound is the one that the show names again. */
export async function followSoundtrack(bench: Workbench): Promise<void> {
	const { store, keeper, parts } = bench;
	const wanted = store.getState().show?.soundtrack ?? null;
	if (wanted === null || wanted.sha256 === bench.heardHash) return;
	store.setState({ afterEdit: null });
	const known = bench.sounds.get(wanted.sha256);
	const file = known?.file ?? (await keeper.readSoundtrack(wanted.sha256));
	if (file === null) {
		await parts.player.load(null);
		bench.soundtrack = null;
		bench.heardHash = null;
		store.setState({ audioReady: false, analysis: null });
		bench.notices.say("caution", `The show's soundtrack is ${wanted.file}: open it too, to hear it.`);
		return;
	}
	const heard = known?.heard ?? (await hear(bench, file, wanted.sha256));
	if (store.getState().show?.soundtrack?.sha256 !== wanted.sha256) return;
	await takeSound(bench, file, heard);
	bench.showChanged({ keep: false });
}
