import { StarstaveError } from "../units/index.ts";
import { capitalise, describePlace } from "./schema/describe-issue.ts";

/** Characters; a show of 20 000 drones and a hundred formations takes about 60 million. */
const MOST_CHARACTERS = 200_000_000;
/** Levels of nesting; a show needs eight. Deeper ones could exhaust the stack of whoever walks them. */
const DEEPEST = 64;
/** Stands in for a number that JSON can't hold while its place is looked up. */
const MARK = "\u0000not a number: ";

/** Keys that would change an object's nature instead of its content; dropped wherever they stand. */
const REFUSED_KEYS: readonly string[] = ["__proto__", "constructor", "prototype"];

type Container = Record<string, unknown> | unknown[];

function isContainer(value: unknown): value is Container {
	return value !== null && typeof value === "object";
}

/**
 * Walks the whole of `root` without recursion.
 * @param visit is handed each value that is not a container, with its path
 * @throws StarstaveError where it is nested too deep
 */
function walk(root: unknown, visit: (value: unknown, path: readonly (string | number)[]) => void): void {
	interface Step {
		readonly node: Container;
		readonly path: readonly (string | number)[];
	}
	const open: Step[] = isContainer(root) ? [{ node: root, path: [] }] : [];
	for (let step = open.pop(); step !== undefined; step = open.pop()) {
		const { node, path } = step;
		if (path.length > DEEPEST) {
			throw new StarstaveError("show", `The show file is nested more than ${DEEPEST} deep; a show needs eight levels.`);
		}
		if (!Array.isArray(node)) for (const key of REFUSED_KEYS) if (Object.hasOwn(node, key)) delete node[key];
		// Numbers make up nearly all of a show: only what holds something else, or a mark, is worth a path.
		const entries: Iterable<[string | number, unknown]> = Array.isArray(node) ? node.entries() : Object.entries(node);
		for (const [key, value] of entries) {
			if (isContainer(value)) open.push({ node: value, path: [...path, key] });
			else if (typeof value === "string") visit(value, [...path, key]);
		}
	}
}

/** Puts a marked string in the place of each bare NaN, Infinity or -Infinity; null where there is none. */
function markNonNumbers(text: string): string | null {
	let found = false;
	// A string (skipped whole), or one of the words that some programs write for numbers that are none.
	const marked = text.replace(/"(?:[^"\\]|\\.)*"|-?\b(?:NaN|Infinity)\b/g, (token) => {
		if (token.startsWith('"')) return token;
		found = true;
		return JSON.stringify(MARK + token);
	});
	return found ? marked : null;
}

function describeSyntax(text: string, error: unknown): string {
	const reason = error instanceof Error ? error.message : String(error);
	const at = /position (\d+)/.exec(reason);
	if (at === null) return "The show file is not whole JSON; open a file that was saved as a show.";
	const before = text.slice(0, Number(at[1])).split("\n");
	return `The show file is not JSON at line ${before.length}, column ${before[before.length - 1].length + 1}; open a file that was saved as a show, or mend that place.`;
}

/**
 * Text → plain data without `__proto__` and its like.
 * @throws StarstaveError one sentence: empty, cut off, not JSON (with line and column), NaN (with its place in the show)
 */
export function parseJson(text: string): unknown {
	if (text.length > MOST_CHARACTERS) {
		throw new StarstaveError(
			"show",
			`The show file is ${text.length} characters long; at most ${MOST_CHARACTERS} are read.`,
		);
	}
	const bare = text.startsWith("\uFEFF") ? text.slice(1) : text;
	if (bare.trim() === "")
		throw new StarstaveError("show", "The show file is empty; open a file that was saved as a show.");
	let root: unknown;
	try {
		root = JSON.parse(bare);
	} catch (error) {
		const marked = markNonNumbers(bare);
		if (marked === null) throw new StarstaveError("show", describeSyntax(bare, error), { cause: error });
		try {
			root = JSON.parse(marked);
		} catch (second) {
			throw new StarstaveError("show", describeSyntax(bare, error), { cause: second });
		}
	}
	walk(root, (value, path) => {
		if (typeof value !== "string" || !value.startsWith(MARK)) return;
		const place = describePlace(root, path);
		throw new StarstaveError(
			"show",
			capitalise(`${place} is ${value.slice(MARK.length)}, but must be a finite number.`),
		);
	});
	return root;
}
