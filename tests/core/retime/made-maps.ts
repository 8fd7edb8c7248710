/** Edit maps and shows written by hand, for what is done with a map once it is there. */
import { type EditMap, isCarried, type Stretch } from "../../../src/core/retime/index.ts";
import { type Cue, createShow, type Show, type Soundtrack, toOrdered } from "../../../src/core/show/index.ts";

export type Kept = readonly [old0: number, old1: number, new0: number, new1: number];

/** A map of kept stretches; what they leave was cut or put in. Joints between them are exact. */
export function makeMap(oldDuration: number, newDuration: number, kept: readonly Kept[], spread = 0): EditMap {
	const carried = kept.map(([old0, old1, new0, new1]): Stretch => {
		const rate = (old1 - old0) / (new1 - new0);
		const plain = Math.abs(rate - 1) < 1e-9;
		return {
			kind: plain ? "kept" : "stretched",
			old: [old0, old1],
			new: [new0, new1],
			rate: plain ? 1 : rate,
			confidence: 1,
			exact: plain,
		};
	});
	const fill = (kind: "cut" | "inserted", from: number, to: number, at: number): Stretch => ({
		kind,
		old: kind === "cut" ? [from, to] : [at, at],
		new: kind === "cut" ? [at, at] : [from, to],
		rate: null,
		confidence: 1,
		exact: false,
	});
	const stretches: Stretch[] = [...carried];
	let at = 0;
	for (const stretch of carried) {
		if (stretch.new[0] > at + 1e-9) stretches.push(fill("inserted", at, stretch.new[0], stretch.old[0]));
		at = stretch.new[1];
	}
	if (newDuration > at + 1e-9) stretches.push(fill("inserted", at, newDuration, oldDuration));
	let covered = 0;
	for (const stretch of [...carried].sort((a, b) => a.old[0] - b.old[0])) {
		if (stretch.old[0] > covered + 1e-9) stretches.push(fill("cut", covered, stretch.old[0], stretch.new[0]));
		covered = Math.max(covered, stretch.old[1]);
	}
	if (oldDuration > covered + 1e-9) stretches.push(fill("cut", covered, oldDuration, newDuration));
	const rank = { cut: 0, inserted: 1, kept: 2, stretched: 2 };
	stretches.sort((a, b) => a.new[0] - b.new[0] || rank[a.kind] - rank[b.kind]);
	const edges = new Set(carried.flatMap((stretch) => [...stretch.new]));
	const joints = [...edges]
		.filter((edge) => edge > 1e-9 && edge < newDuration - 1e-9)
		.sort((a, b) => a - b)
		.map((edge) => ({ at: edge, spread, ambiguous: null }));
	return { version: 1, verdict: "edited", oldDuration, newDuration, stretches, joints, notes: [] };
}

export const carriedOf = (map: EditMap): Stretch[] => map.stretches.filter(isCarried);

export const soundtrack = (duration: number, file = "new.wav"): Soundtrack => ({
	file,
	sha256: (file === "old.wav" ? "a" : "b").repeat(64),
	duration,
	sampleRate: 44100,
	channels: 2,
});

/** Every default of a cue, and what is given. */
export function makeCue(id: string, at: number, more: Partial<Cue> & { readonly kind?: Cue["kind"] } = {}): Cue {
	return {
		id,
		number: id.replace(/\D/g, "") || "1",
		kind: "intensity",
		at,
		length: 0,
		group: "all",
		called: false,
		name: "",
		note: "",
		level: 1,
		fade: 0,
		...more,
	} as Cue;
}

export const transition = (id: string, at: number, length: number, formation: string): Cue =>
	({
		id,
		number: id.replace(/\D/g, "") || "1",
		kind: "transition",
		at,
		length,
		group: "all",
		called: false,
		name: "",
		note: "",
		formation,
		timeLaw: "s-curve",
		light: "keep",
	}) as Cue;

/** 60 s at 120 a minute, four to the bar, hand-corrected so that no two intervals are the same; formations A to D. */
export function makeShow(cues: readonly Cue[], duration = 60): Show {
	const count = Math.floor(duration * 2);
	const beats = Array.from({ length: count }, (_, i) => i * 0.5 + 0.01 * Math.sin(i));
	const formation = (id: string, radius: number): Show["formations"]["byId"][string] => ({
		id,
		name: id,
		shape: { kind: "ring", count: 10, radius },
		place: { position: [0, 0, 40], turn: 0, tilt: 0, scale: 1 },
	});
	return {
		...createShow(10, "Test"),
		soundtrack: soundtrack(duration, "old.wav"),
		grid: {
			beats,
			bars: Array.from({ length: Math.floor(count / 4) }, (_, bar) => ({ beat: 4 * bar, beatsPerBar: 4 })),
			source: "edited",
		},
		sections: [
			{ id: "s1", name: "Intro", letter: "A", from: 0, to: 16 },
			{ id: "s2", name: "Verse", letter: "B", from: 16, to: 64 },
			{ id: "s3", name: "Chorus", letter: "C", from: 64, to: count },
		],
		opening: "A",
		formations: toOrdered([formation("A", 10), formation("B", 12), formation("C", 14), formation("D", 16)]),
		cues: toOrdered(cues),
	};
}
