export { describeShift } from "./carry-cue.ts";
export { moveEdge } from "./correct-map.ts";
export {
	type AnchorPair,
	type EditMap,
	isCarried,
	type Joint,
	newTimeIn,
	oldTimeIn,
	type Stretch,
	type StretchKind,
	toNew,
	toOld,
} from "./edit-map.ts";
export { type MapOptions, mapEdit } from "./map-edit.ts";
export { type Place, placesOf } from "./places.ts";
export { compareTransitions, type RetimeReceipt, type TransitionReceipt } from "./receipt.ts";
export { type RetimeAnswer, retimeAnswer } from "./retime-answer.ts";
export {
	type CueMove,
	type CueOffer,
	type HeardMusic,
	type RetimeResult,
	retimeShow,
} from "./retime-show.ts";
export { type RetimeChoices, settleRetime } from "./settle.ts";
