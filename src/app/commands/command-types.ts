import type { Remedy } from "../../core/flight/index.ts";
import type { AnchorPair, RetimeChoices } from "../../core/retime/index.ts";
import type {
	CueChange,
	DraftShow,
	DroneGroup,
	Fleet,
	Limits,
	NewCue,
	NewFormation,
	Section,
	Takeoff,
	Venue,
} from "../../core/show/index.ts";
import type { PlayRate } from "../../platform/player.ts";
import type { Inquired, Selection } from "../studio-state.ts";

/**
 * All that can be done, by theme. No command throws: what goes wrong becomes a notice, and the answer is false or null.
 * Edits run at once and are one step of undo each; what takes longer is a promise and shows as a job.
 */

export interface ShowCommands {
	/** An empty show for so many drones. */
	newShow(drones: number): boolean;
	/**
	 * A soundtrack or a show, told by content. A soundtrack goes into the open show where that has none, or where it is
	 * the very one that the show names; else it begins a new show. The show that stood here can be brought back. A drawing
	 * (SVG) or points (CSV) become a formation of the open show.
	 */
	openFile(file: File): Promise<boolean>;
	openDemo(): Promise<boolean>;
	/** The show that stood here before the last one was opened. */
	bringBackPrevious(): Promise<boolean>;
	/** Cues and formations from the analysis, in place of those that are there; one step of undo. */
	makeRoughCut(options: { readonly drones: number; readonly seed?: number }): Promise<boolean>;
	/** Into the file that the show came from where the browser can, else as a download. */
	save(options?: { readonly as?: boolean; readonly withSoundtrack?: boolean }): Promise<boolean>;
	exportHandOff(options: HandOffChoice): Promise<boolean>;
	/** Feasibility of the whole show again, everything new. */
	checkAgain(): void;
}

/** What leaves for the crew. */
export interface HandOffChoice {
	/** Rows a second of flight paths, and of light. */
	readonly rate?: number;
	readonly lightRate?: number;
	/** Everything but flight paths and light, for a show that can't be flown yet. */
	readonly draft?: boolean;
	readonly timecode?: { readonly rate?: "24" | "25" | "29.97" | "30"; readonly start?: string };
}

export interface CueCommands {
	/** @returns the new cue's id, which is then selected; null where it was refused */
	addCue(cue: NewCue): string | null;
	changeCue(id: string, change: CueChange): boolean;
	/** Likewise for many at once. */
	changeCues(ids: readonly string[], change: CueChange): boolean;
	moveCue(id: string, at: number): boolean;
	/** By so many beats. */
	moveCues(ids: readonly string[], beats: number): boolean;
	renumberCue(id: string, number: string): boolean;
	copyCues(ids: readonly string[], at: number): readonly string[] | null;
	removeCues(ids: readonly string[]): boolean;
	/** As one edit, whatever it changes. */
	applyRemedy(remedy: Remedy): boolean;
}

export interface FormationCommands {
	addFormation(formation: NewFormation): string | null;
	changeFormation(id: string, change: Partial<Omit<NewFormation, "id">>): boolean;
	copyFormation(id: string): string | null;
	removeFormation(id: string): boolean;
	setOpening(id: string | null): boolean;
	/** An SVG drawing, or points as CSV, becomes a formation. */
	addFormationFrom(file: File): Promise<string | null>;
}

export interface DocumentCommands {
	setTitle(title: string): boolean;
	setNotes(notes: string): boolean;
	setFleet(change: Partial<Omit<Fleet, "limits">>): boolean;
	setLimits(change: Partial<Limits>): boolean;
	setVenue(change: Partial<Venue>): boolean;
	setTakeoff(takeoff: Takeoff | null): boolean;
	setDroneGroup(group: DroneGroup): boolean;
	removeDroneGroup(id: string): boolean;
}

export interface GridCommands {
	/** Every beat so many seconds later. */
	shiftBeats(seconds: number): boolean;
	/** Bars begin so many beats later. */
	shiftBars(beats: number): boolean;
	/** This beat becomes the first of its bar, the others follow its metre. */
	setDownbeat(beat: number): boolean;
	doubleBeats(): boolean;
	halveBeats(): boolean;
	/** The beats between it and those set by hand before follow. */
	moveBeat(beat: number, seconds: number): boolean;
	/** Half way between this beat and the next. */
	insertBeat(after: number): boolean;
	deleteBeat(beat: number): boolean;
	/** A tap at what is heard now; the first begins a run of taps. */
	tapBeat(): void;
	/** The run of taps becomes beats, as one step of undo. */
	takeTaps(): boolean;
	dropTaps(): void;
	setMetre(fromBeat: number, beatsPerBar: number, until?: number): boolean;
	/** The grid and sections as the analysis heard them. */
	takeAnalysedGrid(): boolean;
	setSections(sections: readonly Section[]): boolean;
	/** Coarser or finer sections from what was heard, by so many levels; borders set by hand stay. */
	divideSections(levels: 1 | -1): boolean;
	renameSection(id: string, name: string): boolean;
	setSectionLetter(id: string, letter: string): boolean;
	moveSectionStart(id: string, beat: number): boolean;
	splitSection(id: string, beat: number): string | null;
	joinSections(id: string): boolean;
}

export interface DeskCommands {
	select(selection: Selection): void;
	/** Takes a cue into the selection or out of it. */
	selectCue(id: string, add?: boolean): void;
	undo(): boolean;
	redo(): boolean;
	/** Traces and remedies of a leg or a formation, into `inquired`; null ends it. */
	lookInto(part: Inquired["part"] | null): void;
	dismissNotice(id: string): void;
	cancelJob(id: string): void;
	play(): Promise<void>;
	pause(): void;
	/** Seconds. */
	seek(seconds: number): void;
	setRate(rate: PlayRate): void;
	setLoop(loop: { readonly from: number; readonly to: number } | null): void;
	setClick(on: boolean): void;
}

export interface NewEditCommands {
	/** Another edit of the soundtrack: finds what went where, into `newEdit`. The show stays as it is. */
	openNewEdit(file: File): Promise<boolean>;
	/** Moves an edge of a stretch that carries old music. @param seconds in the new soundtrack */
	moveEditEdge(index: number, edge: "start" | "end", seconds: number): boolean;
	/** Two places that are the same in the music; everything else is found anew around them. */
	setEditAnchor(pair: AnchorPair): Promise<boolean>;
	takeBackCorrection(): boolean;
	chooseInEdit(change: Partial<RetimeChoices>): void;
	/** Plays the old or the new soundtrack, at the same place in the music. */
	hearEdit(to: "old" | "new"): Promise<void>;
	/** The whole retime as one step of undo. */
	acceptNewEdit(): Promise<boolean>;
	dropNewEdit(): Promise<void>;
	/** Every cue with its old and new place, as a CSV file. */
	saveEditTable(): void;
	putCueInTray(id: string): boolean;
	/** To the beat under the ear. @returns the cue's id; null where it was refused */
	putBackFromTray(index: number): string | null;
	doneReviewing(id: string): boolean;
	goToCue(id: string): void;
}

export type Commands = ShowCommands &
	CueCommands &
	FormationCommands &
	DocumentCommands &
	GridCommands &
	DeskCommands &
	NewEditCommands;

/** One drag, one step of undo. Each update starts from the show as it was when the drag began. */
export interface Drag {
	/** @returns why it stops here, for the user; null where it doesn't. The show then stays as the last update left it. */
	update(edit: (draft: DraftShow) => unknown): string | null;
	commit(): void;
	cancel(): void;
}

/** A drag of one cue by its whole, or of a transition by an end; it stops at its neighbours and says why. */
export interface CueDrag {
	/** @param beats where the edge is taken to; for a whole cue, how far it is moved */
	update(beats: number): string | null;
	commit(): void;
	cancel(): void;
}

/** A drag of one beat; its neighbours follow as far as the anchors beside it. */
export interface BeatDrag {
	/**
	 * @param seconds where the beat is taken to
	 * @param free false: it goes to an onset of the sound near there, if there is one
	 * @returns where it stands now, and how far that is from where it was taken, in seconds; or why it can't go there
	 */
	update(seconds: number, free: boolean): { readonly at: number; readonly moved: number } | string;
	commit(): void;
	cancel(): void;
}
