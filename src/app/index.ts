export type { BeatDrag, Commands, CueDrag, Drag, HandOffChoice } from "./commands/command-types.ts";
export type { AfterEdit, NewEdit } from "./new-edit.ts";
export type { StudioParts } from "./parts.ts";
export { createStudio, type Studio } from "./studio.ts";
export type { Inquired, Job, Notice, Selection, StudioState } from "./studio-state.ts";
