/** A file that the user gets, or gave. */
export interface NamedBytes {
	/** Base name. */
	readonly name: string;
	readonly bytes: Uint8Array;
}

export interface SaveOptions {
	/** Ask for a place even where the file has one. */
	readonly as: boolean;
	/** What the file is, as the system's dialog names it. */
	readonly description: string;
	/** Ends of its name, each with its dot. */
	readonly endings: readonly string[];
}

/** Hands files to the user: into the place where the show lies, where the browser can, else as a download. */
export interface Files {
	/** @returns the name it was saved under; null where the user turned back */
	save(file: NamedBytes, options: SaveOptions): Promise<string | null>;
	/** A plain download, never into the show's own place. */
	download(file: NamedBytes): void;
	/** Another show stands here now: its first save asks for a place. */
	forgetPlace(): void;
}

interface Place {
	readonly name: string;
	createWritable(): Promise<{ write(data: Blob): Promise<void>; close(): Promise<void> }>;
}
type Picker = (options: {
	suggestedName: string;
	types: { description: string; accept: Record<string, string[]> }[];
}) => Promise<Place>;

/** The File System Access picker (WICG), which the DOM's types don't know and not every browser has. */
function savePicker(): Picker | null {
	const picker = (window as { showSaveFilePicker?: Picker }).showSaveFilePicker;
	return picker === undefined ? null : picker.bind(window);
}

const toBlob = (bytes: Uint8Array): Blob => new Blob([bytes as Uint8Array<ArrayBuffer>]);

export function createBrowserFiles(): Files {
	let place: Place | null = null;

	const download = ({ name, bytes }: NamedBytes): void => {
		const link = document.createElement("a");
		link.href = URL.createObjectURL(toBlob(bytes));
		link.download = name;
		link.click();
		// The browser has taken the address by then; it reads on even when a slow disk takes longer.
		setTimeout(() => URL.revokeObjectURL(link.href), 60_000);
	};

	const choose = async (picker: Picker, name: string, options: SaveOptions): Promise<Place | null> => {
		try {
			return await picker({
				suggestedName: name,
				types: [{ description: options.description, accept: { "application/octet-stream": [...options.endings] } }],
			});
		} catch (error) {
			if (error instanceof DOMException && error.name === "AbortError") return null;
			throw error;
		}
	};

	return {
		save: async (file, options) => {
			const picker = savePicker();
			if (picker === null) {
				download(file);
				return file.name;
			}
			if (options.as || place === null || place.name !== file.name) {
				const chosen = await choose(picker, file.name, options);
				if (chosen === null) return null;
				place = chosen;
			}
			const stream = await place.createWritable();
			await stream.write(toBlob(file.bytes));
			await stream.close();
			return place.name;
		},
		download,
		forgetPlace: () => {
			place = null;
		},
	};
}
