import { CATALOGUE, channelOf, splitCode } from '$lib/domain/channels/catalogue';
import type { ColumnMap } from '$lib/domain/model';
import type { ProposedColumn } from '$lib/domain/trace';
import { UNIT_ROWS } from '$lib/domain/units/table';

/** A column as the map editor holds it: texts, as fields are. */
export interface DraftColumn {
	index: number;
	/** Canonical code; empty keeps the column under its own header. */
	channel: string;
	unit: string;
	/** Empty: as the unit or the channel has it. */
	reference: '' | 'gauge' | 'absolute';
}

/** From here on a guess is put in without a question; the same bound as the import's. */
const SURE = 0.8;

/**
 * What the editor starts with: what is sure, and what must be asked where only one column claims it. Two columns that
 * claim one channel are left for the person to tell apart.
 */
export function draftOf(proposal: readonly ProposedColumn[]): DraftColumn[] {
	const claims = (code: string) => proposal.filter(({ guess }) => guess === code).length;
	return proposal.map(({ index, guess, confidence, ask, unit }) => ({
		index,
		channel: guess !== null && (confidence >= SURE || (ask && claims(guess) === 1)) ? guess : '',
		unit: unit ?? '',
		reference: ''
	}));
}

/**
 * The channel that each column gets: several columns of a channel that may occur often are numbered in the order of the
 * file. The same codes are shown beside the fields and sent.
 */
export function codesOf(draft: readonly DraftColumn[]): (string | null)[] {
	const times = new Map<string, number>();
	for (const { channel } of draft) times.set(channel, (times.get(channel) ?? 0) + 1);
	const given = new Set(draft.map(({ channel }) => channel));
	return draft.map(({ channel }) => {
		if (channel === '') return null;
		const isOften = (times.get(channel) ?? 0) > 1 && channelOf(channel)?.indexable;
		if (!isOften || splitCode(channel).index !== null) return channel;
		let number = 1;
		while (given.has(`${channel}.${number}`)) number++;
		given.add(`${channel}.${number}`);
		return `${channel}.${number}`;
	});
}

export function columnsOf(draft: readonly DraftColumn[]): ColumnMap[] {
	const codes = codesOf(draft);
	return draft.map(({ index, unit, reference }, at) => ({
		index,
		channel: codes[at] ?? null,
		unit: unit.trim() || null,
		...(reference ? { reference } : {})
	}));
}

/** Channels that a column can be, with those that the proposal numbered already. */
export function channelChoices(proposal: readonly ProposedColumn[]): { value: string; label: string }[] {
	const numbered = proposal.flatMap(({ guess }) => (guess && splitCode(guess).index !== null ? [guess] : []));
	const codes = [
		...[...CATALOGUE.values()].filter(({ derived }) => !derived).map(({ code }) => code),
		...numbered
	];
	return [...new Set(codes)].flatMap((code) => {
		const channel = channelOf(code);
		const { index } = splitCode(code);
		return channel
			? [{ value: code, label: index === null ? channel.label : `${channel.label} ${index}` }]
			: [];
	});
}

/** Units in which the numbers of a channel may come, as they are offered. */
export function unitChoices(channel: string): string[] {
	const dimension = channelOf(channel)?.dimension;
	return UNIT_ROWS.filter((row) => row.dimension === dimension).map(({ unit }) => unit);
}

export const isPressure = (channel: string): boolean => channelOf(channel)?.dimension === 'pressure';
