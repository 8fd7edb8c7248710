export { CAUTIONS } from "./cautions.ts";
export { type CueLine, cueListCsv, cueListJson, cueValues, listCues } from "./cue-list.ts";
export { flashSentence } from "./flash-sentence.ts";
export type { PathRates, TableFile } from "./flight-paths.ts";
export { type Handoff, type HandoffInput, type HandoffOptions, handOff } from "./hand-off.ts";
export { type HandoffFile, type ListedFile, listFile } from "./manifest.ts";
export { type ReportInput, writeReport } from "./report.ts";
export { retimeCsv } from "./retime-csv.ts";
export { revisionCode } from "./revision.ts";
export {
	DEFAULT_TIMECODE,
	framesASecond,
	framesOf,
	labelOf,
	TIMECODE_RATES,
	type Timecode,
	type TimecodeRate,
	timecodeAt,
} from "./timecode.ts";
