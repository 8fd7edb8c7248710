import type { BaseIssue } from "valibot";

/** What the file holds there, as short as it can be said. */
function showValue(value: unknown): string {
	if (value === undefined) return "missing";
	if (typeof value === "number") return String(value);
	if (Array.isArray(value)) return `a list of ${value.length}`;
	if (value !== null && typeof value === "object") return "a group of values";
	const text = JSON.stringify(value);
	return text.length > 60 ? `${text.slice(0, 57)}…"` : text;
}

const SINGULAR: Readonly<Record<string, string>> = {
	cues: "cue",
	formations: "formation",
	sections: "section",
	groups: "group",
};

function own(value: unknown, key: string | number): unknown {
	return value !== null && typeof value === "object" && Object.hasOwn(value, key)
		? (value as Readonly<Record<string | number, unknown>>)[key]
		: undefined;
}

/** "cue 12.5 (id c7)", "formation Heart (id f1)", "section 3 of the list" where it has neither name nor id. */
function nameThing(kind: string, thing: unknown, index: number): string {
	const called = own(thing, kind === "cue" ? "number" : "name");
	const id = own(thing, "id");
	const named = typeof called === "string" && called !== "" ? ` ${called}` : "";
	if (typeof id === "string") return `${kind}${named} (id ${id})`;
	return named === "" ? `${kind} ${index + 1} of the list` : `${kind}${named}`;
}

/**
 * A place in the show as people say it.
 * @param root the file's content, for names and numbers
 * @param path keys and indices from the root
 * @returns "cue 12.5 (id c7): at", "formation Heart (id f1): item 3 of shape.points", "fleet.count"
 */
export function describePlace(root: unknown, path: readonly (string | number)[]): string {
	let rest = path;
	let subject = "";
	const [first, index] = path;
	if (typeof first === "string" && typeof index === "number" && Object.hasOwn(SINGULAR, first)) {
		subject = nameThing(SINGULAR[first], own(own(root, first), index), index);
		rest = path.slice(2);
	}
	let field = "";
	for (const key of rest) {
		if (typeof key === "number") field = `item ${key + 1} of ${field}`;
		else if (field.startsWith("item ")) field = `${key} of ${field}`;
		else field = field === "" ? key : `${field}.${key}`;
	}
	if (subject === "") return field === "" ? "the show" : field;
	return field === "" ? subject : `${subject}: ${field}`;
}

export function capitalise(sentence: string): string {
	return sentence.charAt(0).toUpperCase() + sentence.slice(1);
}

/** One sentence for what the schema found first: where, what stands there, what would be right. */
export function describeIssue(root: unknown, issue: BaseIssue<unknown>): string {
	const path: (string | number)[] = [];
	for (const item of issue.path ?? []) {
		if (typeof item.key === "string" || typeof item.key === "number") path.push(item.key);
	}
	const place = describePlace(root, path);
	let right = issue.message;
	if (issue.received === "undefined") right = /^must/.test(right) ? right : "must be given";
	else if (/^Invalid/.test(right)) right = `must be ${issue.expected === "Array" ? "a list" : "a group of values"}`;
	return capitalise(`${place} is ${showValue(issue.input)}, but ${right}.`);
}
