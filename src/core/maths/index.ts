export { createRandom, type SeededRandom } from "./seeded-random.ts";
