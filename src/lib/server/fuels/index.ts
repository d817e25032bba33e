export {
	changeFuelBatch,
	checkFuelBatch,
	createFuelBatch,
	fuelBatchBehind,
	fuelBatchHistory,
	getFuelBatch,
	listFuelBatches,
	listFuelBatchVersions,
	recomputeFuelBatch
} from './batches';
export { changeFuel, createFuel, fuelHistory, getFuel, listFuels } from './fuels';
export {
	ChangedFuelBatch,
	FuelBatchChange,
	FuelBatchCheck,
	FuelBatchQuery,
	FuelBatchVersions,
	FuelBatchView,
	FuelChange,
	FuelView,
	NewFuel,
	NewFuelBatch,
	type Fuel
} from './schemas';
