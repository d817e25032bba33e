import type { z } from 'zod';
import type { NewCell } from '../../cells';

const weekdays = [1, 2, 3, 4, 5];
const open = (days: readonly number[], from: string, to: string) => days.map((day) => ({ day, from, to }));

/** What the torque chain of a cell shows over what is there, where that is not 1. Nobody in the lab knows it yet. */
export const TORQUE_READS: Readonly<Record<string, number>> = { EC1: 1.015 };

/** Four test cells: two that only brake, two that can drive. */
export const DEMO_CELLS: readonly z.input<typeof NewCell>[] = [
	{
		code: 'EC1',
		name: 'Cell 1, eddy current',
		absorber: { kind: 'eddy_current', maxPowerKw: 220, maxTorqueNm: 480, maxSpeedRpm: 9000 },
		envelope: [
			[0, 60],
			[600, 300],
			[1200, 480],
			[4370, 480],
			[6000, 350],
			[9000, 233]
		],
		torqueAt: 'stator',
		rotorInertiaKgM2: 0.31,
		shaftInertiaKgM2: 0.02,
		fuels: ['PETROL-E5', 'PETROL-E10', 'SYN-98'],
		rigUpMinutes: 90,
		rigDownMinutes: 60,
		openingHours: open(weekdays, '06:30', '20:00')
	},
	{
		code: 'WB2',
		name: 'Cell 2, water brake',
		absorber: { kind: 'water_brake', maxPowerKw: 400, maxTorqueNm: 1500, maxSpeedRpm: 4500 },
		envelope: [
			[500, 190],
			[1400, 1500],
			[2546, 1500],
			[3500, 1091],
			[4500, 848]
		],
		torqueAt: 'stator',
		rotorInertiaKgM2: 0.24,
		shaftInertiaKgM2: 0.05,
		fuels: ['DIESEL-B7'],
		rigUpMinutes: 120,
		rigDownMinutes: 90,
		openingHours: open(weekdays, '06:30', '20:00')
	},
	{
		code: 'AC3',
		name: 'Cell 3, AC machine',
		absorber: { kind: 'ac', maxPowerKw: 160, maxTorqueNm: 380, maxSpeedRpm: 8000 },
		torqueAt: 'flange',
		rotorInertiaKgM2: 0.46,
		shaftInertiaKgM2: 0.015,
		fuels: ['E85', 'PETROL-E5', 'PETROL-E10', 'SYN-98'],
		rigUpMinutes: 60,
		rigDownMinutes: 45,
		openingHours: [...open(weekdays, '06:00', '22:00'), ...open([6], '07:00', '13:00')]
	},
	{
		code: 'AC4',
		name: 'Cell 4, small AC machine',
		absorber: { kind: 'ac', maxPowerKw: 60, maxTorqueNm: 120, maxSpeedRpm: 12_000 },
		torqueAt: 'flange',
		rotorInertiaKgM2: 0.035,
		shaftInertiaKgM2: 0.003,
		fuels: ['PETROL-E5', 'SYN-98'],
		rigUpMinutes: 45,
		rigDownMinutes: 30,
		openingHours: open(weekdays, '06:30', '20:00')
	}
];
