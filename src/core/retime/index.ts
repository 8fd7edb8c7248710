export {
	type AnchorPair,
	type EditMap,
	isCarried,
	type Joint,
	newTimeIn,
	oldTimeIn,
	type Stretch,
	type StretchKind,
} from "./edit-map.ts";
