import type { Action } from "./actions.ts";

const NAMED: Record<string, string> = {
	ArrowRight: "Right",
	ArrowLeft: "Left",
	ArrowUp: "Up",
	ArrowDown: "Down",
	Backspace: "Delete",
	" ": "Space",
	"=": "+",
};

const PLAIN: Record<string, string> = { Comma: ",", Period: "." };

/** "Ctrl+Shift+Z" of a key event; Command counts as Ctrl. */
export function nameKeys(
	event: Pick<KeyboardEvent, "key" | "code" | "ctrlKey" | "metaKey" | "altKey" | "shiftKey">,
): string {
	// With Shift the sign on a digit's or a comma's key differs from country to country: the key counts.
	const plain = /^Digit(\d)$/.exec(event.code)?.[1] ?? PLAIN[event.code];
	const key =
		plain && event.shiftKey
			? plain
			: (NAMED[event.key] ?? (event.key.length === 1 ? event.key.toUpperCase() : event.key));
	const named = key.length > 1 || /[A-Z0-9]/.test(key) || key === plain;
	const parts: string[] = [];
	if (event.ctrlKey || event.metaKey) parts.push("Ctrl");
	if (event.altKey) parts.push("Alt");
	// A sign like "?" or "+" is itself already the shifted key.
	if (event.shiftKey && named) parts.push("Shift");
	return [...parts, key].join("+");
}

/** Keys that a field, a list or an open menu needs for itself. */
function belongsToField(target: EventTarget | null, keys: string): boolean {
	if (!(target instanceof HTMLElement)) return false;
	if (target.closest("[role=dialog],[role=menu],[role=listbox]")) return true;
	const types = target instanceof HTMLInputElement && !/^(checkbox|radio|range|color|button)$/.test(target.type);
	if (types || target instanceof HTMLTextAreaElement || target.isContentEditable) return !/^Ctrl\+[SKO]$/.test(keys);
	if (target instanceof HTMLSelectElement || target instanceof HTMLInputElement)
		return !keys.startsWith("Ctrl") && !/^[A-Z]$/.test(keys);
	// A focused button is pressed by Space and Enter.
	return target instanceof HTMLButtonElement && (keys === "Space" || keys === "Enter");
}

/** Runs actions by their keys. @returns takes the listener off */
export function attachKeyboard(actions: readonly Action[]): () => void {
	const byKeys = new Map<string, Action>();
	for (const action of actions) for (const keys of action.keys?.split(" or ") ?? []) byKeys.set(keys, action);
	const listen = (event: KeyboardEvent) => {
		const keys = nameKeys(event);
		const action = byKeys.get(keys);
		if (!action || event.defaultPrevented || belongsToField(event.target, keys)) return;
		event.preventDefault();
		if (action.available?.() ?? true) action.run();
	};
	window.addEventListener("keydown", listen);
	return () => window.removeEventListener("keydown", listen);
}
