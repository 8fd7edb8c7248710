// How the truth is written down: JSON with one line for each list of numbers, so that it stays small and readable.

/** JSON text of a truth. */
export function truthText(truth) {
	const lines = Object.entries(truth).map(([key, value]) => {
		if (key === "sections") {
			const rows = value.map((section) => `\t\t${JSON.stringify(section)}`);
			return `\t"sections": [\n${rows.join(",\n")}\n\t]`;
		}
		return `\t${JSON.stringify(key)}: ${JSON.stringify(value)}`;
	});
	return `{\n${lines.join(",\n")}\n}\n`;
}
