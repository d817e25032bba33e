import type { Ambient } from '$lib/domain/model';

interface Source {
	what: string;
	/** Where figures take it from; null: nowhere. */
	from: 'trace' | 'entry' | null;
}

/** Channels that stand before the record's own entry, as the figures take them. */
const KINDS = [
	{ what: 'Barometer', entry: 'barometerKpa', channels: ['barometer'] },
	{ what: 'Temperature', entry: 'temperatureC', channels: ['inlet_temp', 'ambient_temp'] },
	{ what: 'Humidity', entry: 'humidityPct', channels: ['vapour_pressure', 'humidity'] }
] as const;

/** Where the corrections take the air from: the primary trace where it has the channel, else the record's entry. */
export function airSources(ambient: Ambient, channels: readonly { code: string }[]): Source[] {
	return KINDS.map(({ what, entry, channels: wanted }) => {
		const measured = channels.some(({ code }) => (wanted as readonly string[]).includes(code));
		return { what, from: measured ? 'trace' : ambient[entry] === undefined ? null : 'entry' };
	});
}

/** The same as one sentence. */
export function airSentence(sources: readonly Source[]): string {
	const told = (from: Source['from']) =>
		sources
			.filter((source) => source.from === from)
			.map(({ what }) => what.toLowerCase())
			.join(', ');
	const parts = [
		[told('trace'), 'from the trace'],
		[told('entry'), 'as entered for the record'],
		[told(null), 'not known']
	].filter(([what]) => what);
	return `Corrections use: ${parts.map(([what, where]) => `${what} ${where}`).join('; ')}.`;
}
