import type { Paint } from "../../core/show/index.ts";

type Kind = Paint["kind"];

/** A field of a paint: how it is shown and how its new value is written. */
export type PaintField =
	| {
			readonly kind: "colour";
			readonly key: string;
			readonly label: string;
			readonly value: string;
			readonly write: (value: string) => Paint;
	  }
	| {
			readonly kind: "number";
			readonly key: string;
			readonly label: string;
			readonly value: number;
			readonly step: number;
			readonly write: (value: number) => Paint;
	  }
	| {
			readonly kind: "choice";
			readonly key: string;
			readonly label: string;
			readonly value: string;
			readonly choices: readonly { readonly value: string; readonly name: string }[];
			readonly write: (value: string) => Paint;
	  };

export const PAINT_KINDS: readonly { readonly value: Kind; readonly name: string }[] = [
	{ value: "flat", name: "one colour" },
	{ value: "gradient", name: "gradient" },
	{ value: "swell", name: "swell" },
	{ value: "picture", name: "picture's own" },
];

const SPOKEN: Record<Kind, string> = {
	flat: "one flat colour",
	gradient: "a gradient",
	band: "a travelling band",
	interleave: "an interleave",
	glint: "a glint",
	swell: "a swell",
	picture: "the picture's own colours",
};
export const sayPaint = (kind: Kind): string => SPOKEN[kind];

const LABELS: Record<string, string> = {
	every: "every, beats",
	floor: "between pulses, 0 to 1",
	axis: "runs",
	share: "lit at a time, 0 to 1",
	width: "width, share",
	background: "between",
};
const CHOICES: Record<string, readonly { readonly value: string; readonly name: string }[]> = {
	axis: [
		{ value: "up", name: "upward" },
		{ value: "right", name: "to the right" },
		{ value: "away", name: "away" },
		{ value: "out", name: "outward" },
	],
};

/** The first colour of a paint, to carry over when its kind is changed. */
function coloursOf(paint: Paint): string[] {
	return Object.values(paint)
		.flat()
		.filter((value): value is string => typeof value === "string" && value.startsWith("#"));
}

/** A paint of another kind that keeps the colours that were there. */
export function freshPaint(kind: Kind, before: Paint): Paint {
	const [first = "#f3d9a4", second = "#6fa8dc"] = coloursOf(before);
	switch (kind) {
		case "flat":
			return { kind, colour: first };
		case "gradient":
			return { kind, from: first, to: second, axis: "up" };
		case "band":
			return { kind, colour: first, background: second, axis: "right", width: 0.3, every: 4 };
		case "interleave":
			return { kind, colours: [first, second], every: 0 };
		case "glint":
			return { kind, colour: first, background: "#000000", share: 0.15, every: 1 };
		case "swell":
			return { kind, colour: first, every: 1, floor: 0.35 };
		case "picture":
			return { kind };
	}
}

/** The fields of a paint in the order of the file. */
export function paintFields(paint: Paint): PaintField[] {
	const fields: PaintField[] = [];
	for (const [key, value] of Object.entries(paint)) {
		if (key === "kind") continue;
		const label = LABELS[key] ?? key;
		const write = (next: unknown) => ({ ...paint, [key]: next }) as Paint;
		if (typeof value === "string" && value.startsWith("#")) fields.push({ kind: "colour", key, label, value, write });
		else if (typeof value === "number")
			fields.push({ kind: "number", key, label, value, step: key === "every" ? 0.5 : 0.05, write });
		else if (typeof value === "string" && CHOICES[key])
			fields.push({ kind: "choice", key, label, value, choices: CHOICES[key], write });
		else if (Array.isArray(value)) {
			value.forEach((colour: unknown, i) => {
				if (typeof colour !== "string") return;
				const writeOne = (next: string) =>
					({ ...paint, [key]: value.map((old: unknown, j) => (j === i ? next : old)) }) as Paint;
				fields.push({ kind: "colour", key: `${key}${i}`, label: `colour ${i + 1}`, value: colour, write: writeOne });
			});
		}
	}
	return fields;
}
