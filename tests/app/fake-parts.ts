import type { StudioParts } from "../../src/app/index.ts";
import type { Autosave, KeptShow, KeptSoundtrack, Shelf, Slot } from "../../src/platform/autosave.ts";
import type { NamedBytes } from "../../src/platform/files.ts";
import type { Player, PlayerState } from "../../src/platform/player.ts";
import type { WorkerClient } from "../../src/workers/index.ts";

/** A browser's store in memory; what it is handed it copies, as the browser does. */
export function createMemoryAutosave() {
	const shows = new Map<Slot, KeptShow>();
	const soundtracks = new Map<string, KeptSoundtrack>();
	const shelves: Record<Shelf, Map<string, unknown>> = { plans: new Map(), analyses: new Map() };
	const autosave: Autosave = {
		readShow: async (slot) => structuredClone(shows.get(slot) ?? null),
		writeShow: async (slot, show) => void shows.set(slot, structuredClone(show)),
		readSoundtrack: async (sha256) => soundtracks.get(sha256) ?? null,
		writeSoundtrack: async (sha256, soundtrack) => void soundtracks.set(sha256, structuredClone(soundtrack)),
		sweepSoundtracks: async () => {
			const kept = new Set([...shows.values()].map((show) => show.soundtrack));
			for (const key of soundtracks.keys()) if (!kept.has(key)) soundtracks.delete(key);
		},
		readShelf: async (shelf, keys) =>
			new Map(
				keys.flatMap((key) => (shelves[shelf].has(key) ? [[key, structuredClone(shelves[shelf].get(key))]] : [])),
			),
		writeShelf: async (shelf, key, value) => void shelves[shelf].set(key, structuredClone(value)),
		close: () => {},
	};
	return { autosave, shows, soundtracks, shelves };
}

/** A player without sound: it remembers what it was told. */
export function createSilentPlayer() {
	let state: PlayerState = { playing: false, rate: 1, loop: null, click: false };
	const told: { seconds: number; channels: number; span: [number, number]; beats: number } = {
		seconds: 0,
		channels: 0,
		span: [0, 0],
		beats: 0,
	};
	const listeners = new Set<(state: PlayerState) => void>();
	const set = (change: Partial<PlayerState>) => {
		state = { ...state, ...change };
		for (const listener of listeners) listener(state);
	};
	let at = 0;
	const player: Player = {
		get state() {
			return state;
		},
		subscribe: (listener) => {
			listeners.add(listener);
			return () => void listeners.delete(listener);
		},
		load: async (sound) => {
			at = 0;
			told.seconds = sound === null ? 0 : sound.channels[0].length / sound.sampleRate;
			told.channels = sound?.channels.length ?? 0;
		},
		setSpan: (from, to) => {
			told.span = [from, to];
		},
		setClicks: (clicks) => {
			told.beats = clicks?.beats.length ?? 0;
		},
		play: async () => set({ playing: true }),
		pause: () => set({ playing: false }),
		seek: (seconds) => {
			at = seconds;
		},
		setRate: (rate) => set({ rate }),
		setLoop: (loop) => set({ loop }),
		setClick: (click) => set({ click }),
		heardAt: () => at,
		close: async () => {},
	};
	return { player, told };
}

/** Parts of a studio without a browser. */
export function createFakeParts(workers: WorkerClient, memory = createMemoryAutosave()) {
	const handed: NamedBytes[] = [];
	const { player, told } = createSilentPlayer();
	const parts: StudioParts = {
		workers,
		player,
		files: {
			save: async (file) => {
				handed.push(file);
				return file.name;
			},
			download: (file) => void handed.push(file),
			forgetPlace: () => {},
		},
		openAutosave: async () => memory.autosave,
		takeLease: async () => ({ held: true, later: new Promise(() => {}), release: () => {} }),
		fetchDemo: null,
		decodeInBrowser: null,
	};
	return { parts, handed, told, memory };
}
