export interface ElectricalEnergy {
	/** From the store to the machine, MJ, at or above 0. */
	outMj: number;
	/** Into the store, MJ, at or above 0. */
	inMj: number;
	/** Running net energy out of the store at each sample, MJ. */
	netMj: Float64Array;
	/** Most minus least of the running net: what the store must hold, MJ. */
	swingMj: number;
	/** Highest power out of the store, kW; NaN where none is known. */
	maxKw: number;
}

/**
 * Energy of an electrical store, `∫P dt`, positive from store to machine.
 *
 * @param timeS s, ascending @param powerKw kW, signed; an unknown sample counts nothing on either side of it
 * @param maxGapS a longer step is a hole in the record and counts nothing
 * Where the sign changes inside a step, the straight line between the samples is split at zero, so that out and in do not eat each other.
 */
export function electricalEnergy(
	timeS: ArrayLike<number>,
	powerKw: ArrayLike<number>,
	maxGapS = Infinity
): ElectricalEnergy {
	const netMj = new Float64Array(timeS.length);
	let [outKj, inKj, net, low, high, maxKw] = [0, 0, 0, 0, 0, NaN];
	for (let i = 0; i < timeS.length; i++) {
		const to = powerKw[i]!;
		if (Number.isFinite(to) && !(to <= maxKw)) maxKw = to;
		const step = i === 0 ? 0 : timeS[i]! - timeS[i - 1]!;
		const from = i === 0 ? NaN : powerKw[i - 1]!;
		if (step > 0 && step <= maxGapS && Number.isFinite(from + to)) {
			const crossing = from * to < 0 ? from / (from - to) : 1;
			const first = (crossing * step * (crossing < 1 ? from : from + to)) / 2;
			const second = crossing < 1 ? ((1 - crossing) * step * to) / 2 : 0;
			for (const part of [first, second]) {
				if (part > 0) outKj += part;
				else inKj -= part;
				net += part;
				low = Math.min(low, net);
				high = Math.max(high, net);
			}
		}
		netMj[i] = net / 1000;
	}
	return { outMj: outKj / 1000, inMj: inKj / 1000, netMj, swingMj: (high - low) / 1000, maxKw };
}

/**
 * Power of engine and electrical machine together.
 * @param brakeKw from the measured torque, kW @param electricalKw signed, positive drives, kW
 * @param machineInTorque the machine's torque is already inside the measured torque: then nothing is added
 * @returns kW
 */
export function combinedPowerKw(brakeKw: number, electricalKw: number, machineInTorque: boolean): number {
	return machineInTorque ? brakeKw : brakeKw + electricalKw;
}

/** How long a store of `energyMj` lasts at `powerKw`. @param energyMj MJ @param powerKw kW, above 0 @returns s; NaN otherwise */
export function storeLastsS(energyMj: number, powerKw: number): number {
	return powerKw > 0 ? (1000 * energyMj) / powerKw : NaN;
}
