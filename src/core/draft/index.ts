export { type RoughCut, type RoughCutOptions, roughCut } from "./rough-cut.ts";
