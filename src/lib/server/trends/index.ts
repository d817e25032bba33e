export { trendCsv } from './csv';
export { listMetricCodes, readTrend } from './read';
export { TrendQuery, TrendView } from './schemas';
