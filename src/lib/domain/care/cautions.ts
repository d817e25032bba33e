/** The usual cautions of an engine cell, in the words that every page uses which plans, opens or judges a run. */

export const NO_RELEASE =
	'Trunnion is no interlock and releases nothing. It stops nothing either: nothing on this page is a release to run an engine.';

export const DEFERS =
	'The rules of your site, the codes that apply where you are, and licensed or competent persons decide. Where they differ from what is shown here, they hold.';

/** What can kill in an engine cell, each with what to see to. */
export const CELL_HAZARDS: readonly { hazard: string; care: string }[] = [
	{
		hazard: 'Shafts and couplings burst',
		care: 'Guards closed and fixed, nobody in the plane of the shaft, speed limits set in the cell’s own protection.'
	},
	{
		hazard: 'Fuel vapour ignites',
		care: 'Ventilation proven, leaks looked for, extinguishing ready, fuel shut-off within reach.'
	},
	{ hazard: 'Exhaust poisons', care: 'Extraction running, carbon monoxide alarm tested.' },
	{ hazard: 'Noise deafens', care: 'Ear protection on before the door is opened.' },
	{
		hazard: 'Surfaces burn, coolant scalds',
		care: 'Let it cool; never open a hot pressurised system.'
	},
	{
		hazard: 'High voltage stays after switch-off',
		care: 'Only persons qualified for it, isolated, proven dead.'
	}
];
