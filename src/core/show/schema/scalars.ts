import * as v from "valibot";

/** Building blocks of the show file. Messages name what would be right; where it stands is added by the reader. */
const finite = v.pipe(v.number("must be a number"), v.finite("must be a finite number"));

export const number = finite;
export const between = (least: number, most: number) =>
	v.pipe(finite, v.minValue(least, `must be at least ${least}`), v.maxValue(most, `must be at most ${most}`));
export const above = (least: number, most: number) =>
	v.pipe(finite, v.gtValue(least, `must be more than ${least}`), v.maxValue(most, `must be at most ${most}`));
export const whole = (least: number, most: number) =>
	v.pipe(
		finite,
		v.integer("must be a whole number"),
		v.minValue(least, `must be at least ${least}`),
		v.maxValue(most, `must be at most ${most}`),
	);
export const text = v.string("must be text");
/** Ids are keys of plain objects in memory, so the names that every object answers to are not ids. */
export const id = v.pipe(
	text,
	v.minLength(1, "must not be empty"),
	v.maxLength(200, "must be at most 200 characters"),
	v.check((name) => !(name in {}), "must not be a name that JavaScript objects reserve"),
);
export const flag = v.boolean("must be true or false");
/** sRGB as #rrggbb. */
export const colour = v.pipe(text, v.regex(/^#[0-9a-fA-F]{6}$/, "must be a colour written #rrggbb"));
/** [x, y, z] in metres, or as the field says. */
export const triple = v.strictTuple([finite, finite, finite], "must be three numbers");
export const pair = v.strictTuple([finite, finite], "must be two numbers");
