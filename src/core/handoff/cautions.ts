/** What every report and sheet says, whatever the show. */
export const CAUTIONS: readonly string[] = [
	"The proof covers the plan, not the flight: spacing must include position error, tracking and wind.",
	"Unlit aircraft at night may need permission.",
	"Timecode and MIDI never arm or launch.",
	"Go or no-go belongs to the flight director: wind aloft, rain, icing, satellite navigation and radio, intruders, a clear field until every drone is disarmed.",
	"Local codes and licensed practice come first.",
];
