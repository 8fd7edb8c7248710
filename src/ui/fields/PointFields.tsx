import { NumberField } from "./Field.tsx";

type Point = readonly [number, number, number];

interface PointFieldsProps {
	/** Written round the axis: `seat, right`. */
	label?: (axis: string) => string;
	value: Point;
	step?: number;
	disabled?: boolean;
	onSet: (point: [number, number, number]) => boolean;
}

/** A point of the show frame, m: to the audience's right, away from it, up. */
export function PointFields({ label = (axis) => axis, value, step, disabled, onSet }: PointFieldsProps) {
	return ["right", "away", "up"].map((axis, i) => (
		<NumberField
			key={axis}
			label={label(axis)}
			unit="m"
			step={step}
			value={value[i]}
			disabled={disabled}
			onSet={(number) => {
				const point: [number, number, number] = [value[0], value[1], value[2]];
				point[i] = number;
				return onSet(point);
			}}
		/>
	));
}
