import type { InferInput } from "valibot";
import { StarstaveError } from "../../units/index.ts";
import { requireSections } from "../check-references.ts";
import { type Section, section as sectionSchema } from "../schema/show-file.ts";
import type { DraftShow } from "./apply-edit.ts";
import { checkListed } from "./check-part.ts";
import { newId } from "./new-id.ts";

/** Replaces the sections. They must rise and not overlap; gaps between them are allowed. */
export function setSections(draft: DraftShow, sections: readonly InferInput<typeof sectionSchema>[]): void {
	const next: Section[] = sections.map((section) => checkListed(sectionSchema, "sections", section));
	requireSections(next);
	draft.sections = next;
}

function indexOf(draft: DraftShow, id: string): number {
	const index = draft.sections.findIndex((section) => section.id === id);
	if (index < 0) throw new StarstaveError("show", `The show has no section with the id ${id}.`);
	return index;
}

export function renameSection(draft: DraftShow, id: string, name: string): void {
	draft.sections[indexOf(draft, id)].name = name;
}

/** Says which music a section is: sections with one letter look alike in a rough cut. */
export function setSectionLetter(draft: DraftShow, id: string, letter: string): void {
	draft.sections[indexOf(draft, id)].letter = letter;
}

/** Moves the border between a section and the one before it. */
export function moveSectionStart(draft: DraftShow, id: string, beat: number): void {
	const index = indexOf(draft, id);
	const sections = draft.sections.map((section) => ({ ...section }));
	const joined = index > 0 && sections[index - 1].to === sections[index].from;
	sections[index].from = beat;
	if (joined) sections[index - 1].to = beat;
	setSections(draft, sections);
}

/** Splits a section in two at a beat inside it. @returns the second half's id */
export function splitSection(draft: DraftShow, id: string, beat: number): string {
	const index = indexOf(draft, id);
	const section = draft.sections[index];
	if (!(beat > section.from && beat < section.to)) {
		throw new StarstaveError(
			"show",
			`Section ${section.name || section.id} runs from beat ${section.from} to ${section.to}; it can't be split at beat ${beat}.`,
		);
	}
	const made = newId(
		"s",
		draft.sections.map((other) => other.id),
	);
	draft.sections.splice(index + 1, 0, { ...section, id: made, from: beat });
	draft.sections[index].to = beat;
	return made;
}

/** Joins a section to the one after it; the first one's name and letter stay. */
export function joinSections(draft: DraftShow, id: string): void {
	const index = indexOf(draft, id);
	if (index + 1 >= draft.sections.length) {
		throw new StarstaveError("show", "The last section has none after it to be joined to.");
	}
	draft.sections[index].to = draft.sections[index + 1].to;
	draft.sections.splice(index + 1, 1);
}
