/** Where a Chromium stands; null where there is none. */
export function findChromium(): string | null;
/** Installs or asks for one. */
export function ensureChromium(): void;
