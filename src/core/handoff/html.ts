/** Markup that is safe to put into a page as it stands. */
export interface Html {
	readonly html: string;
}

const ESCAPES: Readonly<Record<string, string>> = {
	"&": "&amp;",
	"<": "&lt;",
	">": "&gt;",
	'"': "&quot;",
	"'": "&#39;",
};

export function escapeHtml(text: string): string {
	return text.replace(/[&<>"']/g, (sign) => ESCAPES[sign]);
}

type Part = Html | string | number | null | readonly Part[];

function render(part: Part): string {
	if (part === null) return "";
	if (typeof part === "string") return escapeHtml(part);
	if (typeof part === "number") return escapeHtml(String(part));
	if ("html" in part) return part.html;
	return part.map(render).join("");
}

/** A template whose holes are escaped unless they are markup themselves: html`<p>${name}</p>`. */
export function html(fixed: TemplateStringsArray, ...parts: readonly Part[]): Html {
	return { html: fixed.reduce((out, piece, i) => out + piece + (i < parts.length ? render(parts[i]) : ""), "") };
}

/** A table with a head that is repeated on every printed page. */
export function table(head: readonly string[], rows: readonly (readonly Part[])[]): Html {
	const cells = rows.map((row) => html`<tr>${row.map((cell) => html`<td>${cell}</td>`)}</tr>\n`);
	return html`<table><thead><tr>${head.map((name) => html`<th scope="col">${name}</th>`)}</tr></thead><tbody>\n${cells}</tbody></table>\n`;
}

export function list(items: readonly Part[]): Html {
	return html`<ul>${items.map((item) => html`<li>${item}</li>`)}</ul>\n`;
}
