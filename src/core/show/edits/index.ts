export { applyEdit, type DraftShow, type EditResult, patchShow } from "./apply-edit.ts";
export { deleteBeat, insertBeat, layBeats, moveBeat } from "./beats-by-hand.ts";
export {
	addCue,
	type CueChange,
	changeCue,
	copyCues,
	moveCue,
	moveCues,
	type NewCue,
	removeCues,
	renumberCue,
	setCues,
} from "./cue-edits.ts";
export {
	removeDroneGroup,
	setDroneGroup,
	setFleet,
	setLimits,
	setNotes,
	setOpening,
	setSoundtrack,
	setTakeoff,
	setTitle,
	setVenue,
} from "./document-edits.ts";
export { addFormation, changeFormation, copyFormation, type NewFormation, removeFormation } from "./formation-edits.ts";
export { doubleBeats, halveBeats, setGrid, setMetre, shiftBars, shiftBeats } from "./grid-edits.ts";
export { newId } from "./new-id.ts";
export {
	joinSections,
	moveSectionStart,
	renameSection,
	setSectionLetter,
	setSections,
	splitSection,
} from "./section-edits.ts";
export { doneReviewing, putBack, putInTray } from "./tray-edits.ts";
