/** Files on their way from the page they were dropped on to the page that opens a record around them; in the browser only. */
let carried: File[] = [];

export function carryFiles(files: File[]): void {
	carried = files;
}

/** Gives them once: a page that is opened again later starts without. */
export function takeCarried(): File[] {
	const files = carried;
	carried = [];
	return files;
}
