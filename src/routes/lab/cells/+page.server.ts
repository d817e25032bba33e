import { ABSORBER_KINDS, listCells, type Cell } from '$lib/server/cells';
import { listing, pageData, personMay } from '$lib/server/web';
import type { PageServerLoad } from './$types';

const SORTS = {
	code: (cell: Cell) => cell.code,
	name: (cell: Cell) => cell.name,
	kind: (cell: Cell) => cell.absorber.kind,
	power: (cell: Cell) => cell.absorber.maxPowerKw,
	torque: (cell: Cell) => cell.absorber.maxTorqueNm,
	speed: (cell: Cell) => cell.absorber.maxSpeedRpm
};

export const load: PageServerLoad = async ({ locals, url }) => {
	const who = personMay(locals, 'lab.read');
	return pageData({ locals }, async () => {
		const all = await listCells(locals.deps, who);
		const kind = ABSORBER_KINDS.find((each) => each === url.searchParams.get('kind'));
		const fuel = url.searchParams.get('fuel') ?? '';
		const cells = all.filter(
			(cell) => (!kind || cell.absorber.kind === kind) && (!fuel || !cell.fuels || cell.fuels.includes(fuel))
		);
		return {
			...listing(cells, url, SORTS),
			none: all.length === 0,
			filters: { kind: kind ?? '', fuel },
			kinds: ABSORBER_KINDS.filter((each) => all.some((cell) => cell.absorber.kind === each)),
			fuels: [...new Set(all.flatMap((cell) => cell.fuels ?? []))].sort()
		};
	});
};
