/** The part of the library that the tests of Student's t use as an independent answer. */
declare module 'jstat' {
	const library: {
		jStat: { studentt: { inv(p: number, df: number): number; cdf(t: number, df: number): number } };
	};
	export default library;
}
