/**
 * What is seen to before an engine is started on a test bed, by common practice of the trade. The rules of the site and
 * competent persons decide what is needed; ticking releases nothing. Change the wording under a new version only:
 * records keep the version that they were ticked against.
 */
export const CHECKLIST_VERSION = 1;

interface ChecklistItem {
	code: string;
	/** To be ticked when it was seen to. */
	text: string;
	/** What to look at. */
	look: string;
}

export const CHECKLIST: readonly ChecklistItem[] = [
	{
		code: 'guards',
		text: 'Guards and shaft cover are closed and fixed',
		look: 'Nothing loose under them, nobody in the plane of the shaft.'
	},
	{
		code: 'coupling',
		text: 'Coupling and shaft bolts are tight',
		look: 'Torque marks in line; no crack, no play, speed within what the shaft is rated for.'
	},
	{
		code: 'mounts',
		text: 'Engine mounts and restraints are tight',
		look: 'Alignment as recorded at rig-up.'
	},
	{
		code: 'fluids',
		text: 'Coolant and oil are filled, valves open',
		look: 'Levels, pressures, the absorber’s water or oil as its maker asks.'
	},
	{
		code: 'fuel',
		text: 'Fuel lines are tight, the batch is the one declared',
		look: 'No drip under pressure; fuel shut-off within reach and free.'
	},
	{
		code: 'ventilation',
		text: 'Extraction runs, the carbon monoxide alarm was tested',
		look: 'Exhaust joints tight, air flow proven before fuel is let in.'
	},
	{
		code: 'stop',
		text: 'Emergency stop was tried, from the desk and from the cell',
		look: 'Fuel, ignition and absorber go to their safe state.'
	},
	{
		code: 'protection',
		text: 'Overspeed and other trips of the cell are set for this engine',
		look: 'In the cell’s own protection: limits here are judged afterwards and stop nothing.'
	},
	{
		code: 'fire',
		text: 'Fire equipment is ready',
		look: 'Extinguishers in date, fixed system armed as the site asks, way out clear.'
	},
	{
		code: 'electrical',
		text: 'High voltage is isolated or guarded',
		look: 'Only persons qualified for it; proven dead where it was worked on.'
	},
	{
		code: 'torque_zero',
		text: 'Torque zero was taken and checked',
		look: 'Unloaded and still; calibration in date.'
	},
	{
		code: 'logger',
		text: 'The logger runs and its clock is right',
		look: 'Channels alive, sensors plausible against the room.'
	},
	{
		code: 'clear',
		text: 'Nobody is in the cell, doors are closed',
		look: 'Warning sign on; ear protection before any door is opened.'
	}
];
