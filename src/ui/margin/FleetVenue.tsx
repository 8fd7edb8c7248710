import type { Limits } from "../../core/show/index.ts";
import { NumberField } from "../fields/Field.tsx";
import { PointFields } from "../fields/PointFields.tsx";
import { useStudio, useStudioState } from "../studio-context.ts";
import { AirFields } from "./AirFields.tsx";
import { AudienceFields } from "./AudienceFields.tsx";
import { Cautions } from "./Margin.tsx";

const LIMITS: readonly {
	readonly key: keyof Limits & string;
	readonly label: string;
	readonly unit?: string;
	readonly step: number;
}[] = [
	{ key: "horizontal", label: "horizontal speed", unit: "m/s", step: 0.5 },
	{ key: "climb", label: "climb", unit: "m/s", step: 0.5 },
	{ key: "descent", label: "descent", unit: "m/s", step: 0.5 },
	{ key: "acceleration", label: "acceleration", unit: "m/s²", step: 0.5 },
	{ key: "jerk", label: "jerk", unit: "m/s³", step: 1 },
	{ key: "spacing", label: "spacing", unit: "m", step: 0.1 },
	{ key: "downwash", label: "downwash", step: 0.5 },
	{ key: "endurance", label: "endurance", unit: "s", step: 30 },
	{ key: "reserve", label: "reserve, share", step: 0.05 },
];
const SIDES = [
	{ side: "min", name: "from" },
	{ side: "max", name: "to" },
] as const;

/** What the drones can do and where they may be. */
export function FleetVenue() {
	const { commands } = useStudio();
	const fleet = useStudioState((state) => state.show?.fleet ?? null);
	const venue = useStudioState((state) => state.show?.venue ?? null);
	const readOnly = useStudioState((state) => state.readOnly !== null);
	if (!fleet || !venue) return null;
	return (
		<>
			<h2>Fleet &amp; venue</h2>
			<div className="fields">
				<NumberField
					label="drones"
					value={fleet.count}
					disabled={readOnly}
					onSet={(count) => commands.setFleet({ count })}
				/>
				<NumberField
					label="spares"
					value={fleet.spares}
					disabled={readOnly}
					onSet={(spares) => commands.setFleet({ spares })}
				/>
				<NumberField
					label="mass"
					unit="kg"
					step={0.05}
					value={fleet.mass}
					disabled={readOnly}
					onSet={(mass) => commands.setFleet({ mass })}
				/>
				<NumberField
					label="position error"
					unit="m"
					step={0.05}
					value={fleet.positionError}
					disabled={readOnly}
					onSet={(positionError) => commands.setFleet({ positionError })}
				/>
				{LIMITS.map(({ key, label, unit, step }) => (
					<NumberField
						key={key}
						label={label}
						unit={unit}
						step={step}
						value={fleet.limits[key] as number}
						disabled={readOnly}
						onSet={(value) => commands.setLimits({ [key]: value })}
					/>
				))}
			</div>
			<p className="quiet small">
				The figures at the start are common practice, with no source. What holds is your fleet's own data sheet and your
				pilots' word.
			</p>
			<h3>Flight volume and buffer</h3>
			<div className="fields">
				{SIDES.map(({ side, name }) => (
					<PointFields
						key={side}
						label={(axis) => `${axis}, ${name}`}
						step={5}
						value={venue.volume[side]}
						disabled={readOnly}
						onSet={(corner) => commands.setVenue({ volume: { ...venue.volume, [side]: corner } })}
					/>
				))}
				<NumberField
					label="buffer around it"
					unit="m"
					step={1}
					value={venue.buffer}
					disabled={readOnly}
					onSet={(buffer) => commands.setVenue({ buffer })}
				/>
				<NumberField
					label="wind"
					unit="m/s"
					step={1}
					value={venue.wind}
					disabled={readOnly}
					onSet={(wind) => commands.setVenue({ wind })}
				/>
				<PointFields
					label={(axis) => `seat, ${axis}`}
					value={venue.seat}
					disabled={readOnly}
					onSet={(seat) => commands.setVenue({ seat })}
				/>
			</div>
			<AudienceFields venue={venue} />
			<AirFields fleet={fleet} venue={venue} />
			<Cautions />
		</>
	);
}
