/** A fleet as flight tests have it: m, s; common practice, no source. */
export const LIMITS = {
	horizontal: 6,
	climb: 3,
	descent: 2,
	acceleration: 3,
	jerk: 10,
	spacing: 1.5,
	downwash: 2,
	endurance: 900,
	reserve: 0.25,
};
