import { NONE, plainNumber } from '../display/format';
import { IGNITION_WORDS, INDUCTION_WORDS } from '../display/words';
import type { FieldWords } from '../history/changes';

const number = (label: string, unit = ''): FieldWords => ({
	label,
	text: (value) => (typeof value === 'number' ? `${plainNumber(value)}${unit && ` ${unit}`}` : 'not known')
});
const wordOf =
	(words: Readonly<Record<string, string>>): FieldWords['text'] =>
	(value) =>
		typeof value === 'string' ? (words[value] ?? value) : 'not known';

/** An engine's facts as its history tells them. */
export const ENGINE_WORDS: Readonly<Record<string, FieldWords>> = {
	name: { label: 'Name', text: (value) => (typeof value === 'string' ? value : NONE) },
	displacementL: number('Displacement', 'L'),
	cylinders: number('Cylinders'),
	strokesPerCycle: number('Strokes per cycle'),
	ignition: { label: 'Ignition', text: wordOf(IGNITION_WORDS) },
	induction: { label: 'Induction', text: wordOf(INDUCTION_WORDS) },
	inertiaKgM2: number('Rotating inertia', 'kg·m²'),
	boreMm: number('Bore', 'mm'),
	strokeMm: number('Stroke', 'mm'),
	compressionRatio: number('Compression ratio'),
	maxSpeedRpm: number('Top speed', 'rev/min'),
	expectedTorque: {
		label: 'Expected torque',
		text: (value) =>
			Array.isArray(value) && value.length > 0
				? `${value.length} ${value.length === 1 ? 'point' : 'points'}`
				: 'not known'
	}
};
