import type { FileColumn } from '../trace-file';

const column = (code: string, header: string, unit: string, digits: number): FileColumn => ({
	code,
	header,
	unit,
	digits
});

/** Columns of the four cells' measuring systems, under the words that each of them uses. */
export const COLUMNS = {
	cell1: [
		column('time', 'time', 's', 3),
		column('speed', 'engine speed', 'rev/min', 1),
		column('torque', 'torque', 'Nm', 2),
		column('throttle', 'throttle', '%', 1),
		column('fuel_flow', 'fuel flow', 'kg/h', 3),
		column('air_flow', 'air flow', 'kg/h', 2),
		column('lambda_sensor', 'lambda', '-', 4),
		column('manifold_pressure', 'manifold pressure', 'kPa', 2),
		column('manifold_temp', 'manifold temp', 'degC', 2),
		column('coolant_temp', 'coolant temp', 'degC', 2),
		column('oil_temp', 'oil temp', 'degC', 2),
		column('oil_pressure', 'oil pressure', 'kPa', 1),
		column('exhaust_temp.1', 'exhaust temp', 'degC', 1)
	],
	cell2: [
		column('time', 'Time', 's', 2),
		column('speed', 'Speed', '1/min', 1),
		column('torque', 'Torque', 'Nm', 1),
		column('throttle', 'Pedal position', '%', 1),
		column('fuel_flow', 'Fuel mass flow', 'kg/h', 3),
		column('air_flow', 'Air mass flow', 'kg/h', 1),
		column('manifold_pressure', 'Plenum pressure', 'mbar', 1),
		column('manifold_temp', 'Plenum temperature', '°C', 2),
		column('coolant_temp', 'Coolant temperature', '°C', 2),
		column('oil_temp', 'Oil temperature', '°C', 2),
		column('oil_pressure', 'Oil pressure', 'kPa', 1),
		column('exhaust_temp.1', 'Exhaust temperature', '°C', 1),
		column('barometer', 'Barometer', 'mbar', 1),
		column('ambient_temp', 'Room temperature', '°C', 2),
		column('humidity', 'Relative humidity', '%', 1)
	],
	cell3: [
		column('time', 'time', 's', 3),
		column('speed', 'speed', 'rpm', 1),
		column('torque', 'torque', 'Nm', 2),
		column('throttle', 'throttle position', '%', 1),
		column('fuel_flow', 'fuel mass flow', 'g/s', 5),
		column('air_flow', 'air mass flow', 'g/s', 4),
		column('lambda_sensor', 'lambda', '-', 4),
		column('manifold_pressure', 'manifold pressure', 'kPa', 2),
		column('manifold_temp', 'manifold temperature', 'degC', 2),
		column('inlet_temp', 'intake air temperature', 'degC', 2),
		column('coolant_temp', 'coolant temperature', 'degC', 2),
		column('oil_temp', 'oil temperature', 'degC', 2),
		column('oil_pressure', 'oil pressure', 'bar', 3),
		column('exhaust_temp.1', 'exhaust temperature', 'degC', 1),
		column('barometer', 'barometer', 'kPa', 3)
	],
	cell4: [
		column('time', 'Time', 'sec', 3),
		column('speed', 'Engine Speed', 'RPM', 0),
		column('torque', 'Torque', 'lb-ft', 3),
		column('throttle', 'Throttle', '%', 1),
		column('fuel_flow', 'Fuel Flow', 'lb/hr', 4),
		column('air_flow', 'Air Flow', 'lb/min', 4),
		column('lambda_sensor', 'Lambda', '-', 4),
		column('coolant_temp', 'Coolant Temp', 'F', 1),
		column('exhaust_temp.1', 'EGT 1', 'F', 0),
		column('exhaust_temp.2', 'EGT 2', 'F', 0),
		column('barometer', 'Barometer', 'inHg', 3)
	],
	handLogger: [
		column('time', 'time', 's', 3),
		column('speed', 'speed', 'rpm', 0),
		column('torque', 'torque', 'Nm', 2),
		column('throttle', 'throttle', '%', 1),
		column('fuel_flow', 'fuel flow', 'kg/h', 3),
		column('exhaust_temp.1', 'egt', 'degC', 0)
	],
	store: [
		column('time', 'time', 's', 3),
		column('speed', 'speed', 'rpm', 1),
		column('torque', 'torque', 'Nm', 2),
		column('electrical_power', 'electrical power', 'kW', 3),
		column('battery_voltage', 'battery voltage', 'V', 2),
		column('battery_current', 'battery current', 'A', 2),
		column('state_of_charge', 'state of charge', '%', 2),
		column('coolant_temp', 'coolant temperature', 'degC', 2)
	]
} as const satisfies Record<string, readonly FileColumn[]>;
