/** Characters that a value may take on one line: a cue or a section fits, a formation with points does not. */
const LINE = 160;

/**
 * Plain data → JSON that people can read and compare line by line: what fits stands on one line, lists of numbers are
 * filled up to the line's width.
 * @returns text that ends in a line feed
 */
export function layOut(value: unknown): string {
	return `${lay(value, "")}\n`;
}

function lay(value: unknown, indent: string): string {
	const flat = JSON.stringify(value);
	if (flat.length + indent.length <= LINE || value === null || typeof value !== "object") return flat;
	const inner = `${indent}\t`;
	if (Array.isArray(value)) {
		if (value.every((item) => typeof item === "number" || typeof item === "string")) {
			return `[\n${fill(
				value.map((item) => JSON.stringify(item)),
				inner,
			)}\n${indent}]`;
		}
		return `[\n${value.map((item) => `${inner}${lay(item, inner)}`).join(",\n")}\n${indent}]`;
	}
	const fields = Object.entries(value)
		.filter(([, held]) => held !== undefined)
		.map(([key, held]) => `${inner}${JSON.stringify(key)}: ${lay(held, inner)}`);
	return `{\n${fields.join(",\n")}\n${indent}}`;
}

function fill(items: readonly string[], indent: string): string {
	const lines: string[] = [];
	let line = "";
	items.forEach((item, i) => {
		const piece = i < items.length - 1 ? `${item},` : item;
		if (line !== "" && indent.length + line.length + 1 + piece.length > LINE) {
			lines.push(indent + line);
			line = piece;
		} else line = line === "" ? piece : `${line} ${piece}`;
	});
	lines.push(indent + line);
	return lines.join("\n");
}
