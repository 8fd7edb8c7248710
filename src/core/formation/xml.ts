import { StarstaveError } from "../units/index.ts";

/** An element of an XML document: enough of it to read drawings. Namespace prefixes are left off the names. */
export interface XmlElement {
	readonly name: string;
	readonly attributes: ReadonlyMap<string, string>;
	readonly children: readonly XmlElement[];
}

interface OpenElement {
	name: string;
	attributes: Map<string, string>;
	children: XmlElement[];
}

/** Deepest nesting that is read: no drawing needs more, and one that has it was made to do harm. */
const DEEPEST = 200;

const ENTITIES: Readonly<Record<string, string>> = { amp: "&", lt: "<", gt: ">", quot: '"', apos: "'" };

/**
 * Reads elements and attributes (XML 1.0); text, comments, instructions, CDATA and the document type are passed over.
 * Entities of the document's own are not expanded, and nothing outside the text is ever read.
 * @param name the file's name, for the message
 * @throws StarstaveError where the text is no XML document with one root element
 */
export function readXml(text: string, name: string): XmlElement {
	const open: OpenElement[] = [];
	let root: XmlElement | null = null;
	const refuse = (what: string): StarstaveError =>
		new StarstaveError("formation", `${name} is not a readable SVG file: ${what}; export the drawing as plain SVG.`);
	let at = 0;
	while (at < text.length) {
		const start = text.indexOf("<", at);
		if (start < 0) break;
		if (text.startsWith("<!--", start)) at = pastEnd(text, "-->", start + 4);
		else if (text.startsWith("<![CDATA[", start)) at = pastEnd(text, "]]>", start + 9);
		else if (text.startsWith("<?", start)) at = pastEnd(text, "?>", start + 2);
		else if (text.startsWith("<!", start)) at = pastDoctype(text, start + 2);
		else {
			const end = endOfTag(text, start);
			if (end < 0) throw refuse("a tag at its end is not closed");
			const tag = text.slice(start + 1, end);
			at = end + 1;
			if (tag.startsWith("/")) {
				const closing = localName(tag.slice(1).trim());
				const element = open.pop();
				if (element === undefined || element.name !== closing) throw refuse(`</${closing}> closes nothing`);
				if (open.length === 0) root ??= element;
				continue;
			}
			const element = readTag(tag, refuse);
			open[open.length - 1]?.children.push(element);
			if (open.length === 0 && root !== null) throw refuse("it has more than one root element");
			if (tag.endsWith("/")) {
				if (open.length === 0) root = element;
			} else open.push(element);
			if (open.length > DEEPEST) throw refuse(`elements are nested more than ${DEEPEST} deep`);
		}
	}
	if (open.length > 0) throw refuse(`<${open[open.length - 1].name}> is not closed`);
	if (root === null) throw refuse("it holds no element");
	return root;
}

function pastEnd(text: string, mark: string, from: number): number {
	const end = text.indexOf(mark, from);
	return end < 0 ? text.length : end + mark.length;
}

/** The document type may hold declarations in brackets. */
function pastDoctype(text: string, from: number): number {
	const close = text.indexOf(">", from);
	const bracket = text.indexOf("[", from);
	if (bracket >= 0 && bracket < close) return pastEnd(text, ">", pastEnd(text, "]", bracket));
	return close < 0 ? text.length : close + 1;
}

/** The > that ends a tag, outside quoted values; −1 where there is none. */
function endOfTag(text: string, start: number): number {
	let quote = "";
	for (let i = start + 1; i < text.length; i++) {
		const letter = text[i];
		if (quote !== "") {
			if (letter === quote) quote = "";
		} else if (letter === '"' || letter === "'") quote = letter;
		else if (letter === ">") return i;
	}
	return -1;
}

function readTag(tag: string, refuse: (what: string) => StarstaveError): OpenElement {
	const name = /^[^\s/>]+/.exec(tag)?.[0] ?? "";
	if (!/^[A-Za-z_][\w.:-]*$/.test(name)) throw refuse(`<${name.slice(0, 20)}> is no element`);
	const attributes = new Map<string, string>();
	for (const [, key, double, single] of tag.slice(name.length).matchAll(/([\w.:-]+)\s*=\s*(?:"([^"]*)"|'([^']*)')/g))
		attributes.set(localName(key), expand(double ?? single ?? ""));
	return { name: localName(name), attributes, children: [] };
}

/** "svg:path" is a path; "inkscape:label" is kept whole, since it is another thing than "label". */
function localName(name: string): string {
	const colon = name.indexOf(":");
	if (colon < 0) return name;
	const prefix = name.slice(0, colon);
	return prefix === "svg" || prefix === "xlink" ? name.slice(colon + 1) : name;
}

function expand(value: string): string {
	return value.replace(/&(#x[0-9a-fA-F]+|#\d+|\w+);/g, (whole, body: string) => {
		if (body.startsWith("#")) {
			const code = body[1] === "x" ? Number.parseInt(body.slice(2), 16) : Number.parseInt(body.slice(1), 10);
			return code > 0 && code <= 0x10ffff ? String.fromCodePoint(code) : whole;
		}
		return ENTITIES[body] ?? whole;
	});
}
