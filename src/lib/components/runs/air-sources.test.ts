import { describe, expect, it } from 'vitest';
import { airSentence, airSources } from './air-sources';

const channel = (code: string) => ({ code });

describe('where corrections take the air from', () => {
	it('is a channel before an entry, and an entry before nothing', () => {
		const sources = airSources({ barometerKpa: 98.2, temperatureC: 27 }, [channel('inlet_temp')]);
		expect(sources.map(({ from }) => from)).toEqual(['entry', 'trace', null]);
		expect(airSentence(sources)).toBe(
			'Corrections use: temperature from the trace; barometer as entered for the record; humidity not known.'
		);
	});

	it('is the entry for all three where there is no trace yet', () => {
		const sources = airSources({ barometerKpa: 98.2, temperatureC: 27, humidityPct: 40 }, []);
		expect(airSentence(sources)).toBe(
			'Corrections use: barometer, temperature, humidity as entered for the record.'
		);
	});
});
