const WORDS: Readonly<Record<string, string>> = {
	'run.open': 'opened the record',
	'run.close': 'closed the record',
	'run.accept': 'accepted the run',
	'run.void': 'voided the run',
	'run.flag': 'raised a flag',
	'run.figures': 'computed the figures',
	'trace.receive': 'uploaded a trace',
	'trace.map': 'mapped the columns of a trace',
	'trace.primary': 'chose the primary trace',
	'trace.offset': 'set a trace’s clock',
	'run.declare': 'changed what is declared',
	'checklist.done': 'ticked',
	'checklist.not_applicable': 'said it does not apply',
	'checklist.not_done': 'took back a tick',
	'air.read': 'read the air',
	'air.correct': 'corrected a reading of the air',
	'attachment.add': 'attached a file',
	'attachment.remove': 'removed an attachment'
};

/** What was done, to stand after who did it; an action that is not known here is told by its own name. */
export const historyWords = (action: string): string => WORDS[action] ?? action;
