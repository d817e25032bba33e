import { ApiError, toApiError } from './problem';

export interface Progress {
	sentBytes: number;
	totalBytes: number;
	/** Bytes a second since the start. */
	rate: number;
	/** Seconds left at that rate; null before there is one. */
	leftS: number | null;
}

/** Progress of an upload from what was sent after how long; pure, for the screen and the tests. */
export function progressOf(sentBytes: number, totalBytes: number, elapsedMs: number): Progress {
	const rate = elapsedMs > 0 ? (sentBytes * 1000) / elapsedMs : 0;
	return { sentBytes, totalBytes, rate, leftS: rate > 0 ? (totalBytes - sentBytes) / rate : null };
}

export interface Upload {
	/** The answer's body when the server took the file; rejects with an `ApiError`. */
	done: Promise<unknown>;
	abort(): void;
}

/**
 * Sends a file's bytes as they are (no form around them, so the server can stream).
 * XMLHttpRequest because fetch still tells nothing about how much of a request body has gone out.
 */
export function upload(url: string, file: Blob, onProgress: (progress: Progress) => void): Upload {
	const request = new XMLHttpRequest();
	const begun = performance.now();
	const done = new Promise<unknown>((resolve, reject) => {
		request.upload.onprogress = (event) =>
			onProgress(progressOf(event.loaded, file.size, performance.now() - begun));
		request.onload = () => {
			if (request.status >= 200 && request.status < 300) return resolve(parsed(request.responseText));
			reject(toApiError(request.status, request.responseText, request.getResponseHeader('x-request-id')));
		};
		request.onerror = () => reject(new ApiError(0, lost(file)));
		request.onabort = () => reject(new ApiError(0, 'Upload stopped. Nothing was stored.'));
	});
	request.open('POST', url);
	request.setRequestHeader('content-type', 'application/octet-stream');
	request.setRequestHeader('accept', 'application/json');
	request.send(file);
	return { done, abort: () => request.abort() };
}

const lost = (file: Blob) =>
	`The connection was lost while sending${file instanceof File ? ` ${file.name}` : ''}. The file is still here: try again.`;

function parsed(text: string): unknown {
	return text ? JSON.parse(text) : null;
}
