import { type ReactNode, useEffect, useId, useState } from "react";

/** A label over a field. */
export function Field({
	label,
	help,
	children,
	wide,
}: {
	label: string;
	/** One sentence under the field; the field is to be described by `${id}-help`. */
	help?: string;
	children: (id: string) => ReactNode;
	wide?: boolean;
}) {
	const id = useId();
	return (
		<div className={wide ? "field wide" : "field"}>
			<label htmlFor={id}>{label}</label>
			{children(id)}
			{help && (
				<span id={`${id}-help`} className="help">
					{help}
				</span>
			)}
		</div>
	);
}

interface TextFieldProps {
	label: string;
	value: string;
	disabled?: boolean;
	wide?: boolean;
	/** @returns false where the text is refused: the field then goes back to what stands */
	onSet: (text: string) => boolean;
}

/** Text that is taken when the field is left or Enter is pressed; Escape puts back what stood. */
export function TextField({ label, value, disabled, wide, onSet }: TextFieldProps) {
	const [text, setText] = useState(value);
	useEffect(() => setText(value), [value]);
	const take = () => {
		if (text !== value && !onSet(text)) setText(value);
	};
	return (
		<Field label={label} wide={wide}>
			{(id) => (
				<input
					id={id}
					value={text}
					disabled={disabled}
					onChange={(event) => setText(event.target.value)}
					onBlur={take}
					onKeyDown={(event) => {
						if (event.key === "Enter") take();
						if (event.key === "Escape") setText(value);
					}}
				/>
			)}
		</Field>
	);
}

interface NumberFieldProps {
	label: string;
	value: number;
	/** Written behind the number. */
	unit?: string;
	/** One sentence under the field. */
	help?: string;
	disabled?: boolean;
	step?: number;
	onSet: (value: number) => boolean;
}

/** A number with its unit in the label; arrow keys step it. */
export function NumberField({ label, value, unit, help, disabled, step = 1, onSet }: NumberFieldProps) {
	const shown = String(Math.round(value * 10000) / 10000);
	return (
		<SteppedField
			label={unit ? `${label}, ${unit}` : label}
			help={help}
			value={shown}
			disabled={disabled}
			step={(text, direction) => String(Math.round((Number(text) + direction * step) * 10000) / 10000)}
			onSet={(text) => {
				const number = Number(text.replace(",", "."));
				return text.trim() !== "" && Number.isFinite(number) && onSet(number);
			}}
		/>
	);
}

interface SteppedFieldProps extends TextFieldProps {
	help?: string;
	/** The text one step up (1) or down (−1). */
	step: (text: string, direction: 1 | -1) => string;
}

export function SteppedField({ label, value, help, disabled, onSet, step }: SteppedFieldProps) {
	const [text, setText] = useState(value);
	useEffect(() => setText(value), [value]);
	const take = (next: string) => {
		if (next !== value && !onSet(next)) setText(value);
	};
	return (
		<Field label={label} help={help}>
			{(id) => (
				<input
					id={id}
					value={text}
					inputMode="decimal"
					aria-describedby={help ? `${id}-help` : undefined}
					disabled={disabled}
					onChange={(event) => setText(event.target.value)}
					onBlur={() => take(text)}
					onKeyDown={(event) => {
						if (event.key === "Enter") take(text);
						if (event.key === "Escape") setText(value);
						if (event.key === "ArrowUp" || event.key === "ArrowDown") {
							event.preventDefault();
							take(step(text, event.key === "ArrowUp" ? 1 : -1));
						}
					}}
				/>
			)}
		</Field>
	);
}

interface ChoiceFieldProps<T extends string> {
	label: string;
	value: T;
	choices: readonly { readonly value: T; readonly name: string }[];
	disabled?: boolean;
	onSet: (value: T) => unknown;
}

export function ChoiceField<T extends string>({ label, value, choices, disabled, onSet }: ChoiceFieldProps<T>) {
	return (
		<Field label={label}>
			{(id) => (
				<select id={id} value={value} disabled={disabled} onChange={(event) => onSet(event.target.value as T)}>
					{choices.map((choice) => (
						<option key={choice.value} value={choice.value}>
							{choice.name}
						</option>
					))}
				</select>
			)}
		</Field>
	);
}

export function ColourField(props: {
	label: string;
	value: string;
	disabled?: boolean;
	onSet: (colour: string) => unknown;
}) {
	const [colour, setColour] = useState(props.value);
	useEffect(() => setColour(props.value), [props.value]);
	return (
		<Field label={props.label}>
			{(id) => (
				<input
					id={id}
					type="color"
					value={colour}
					disabled={props.disabled}
					onChange={(event) => setColour(event.target.value)}
					// The browser's picker changes the field at every move: one edit when it is left.
					onBlur={() => colour !== props.value && props.onSet(colour)}
				/>
			)}
		</Field>
	);
}

export function CheckField(props: {
	label: string;
	value: boolean;
	disabled?: boolean;
	onSet: (value: boolean) => unknown;
}) {
	return (
		<label className="check">
			<input
				type="checkbox"
				checked={props.value}
				disabled={props.disabled}
				onChange={(event) => props.onSet(event.target.checked)}
			/>
			{props.label}
		</label>
	);
}
