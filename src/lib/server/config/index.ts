import pino from 'pino';
import { z } from 'zod';

/** Everything a deployment may set. Read once, by the process's entry, so that a missing value is told at start-up. */
const Environment = z.object({
	DATABASE_URL: z.string().optional(),
	DATABASE_URL_OWNER: z.string().optional(),
	DATABASE_URL_LAB: z.string().optional(),
	DATABASE_URL_CLIENT: z.string().optional(),
	DATABASE_URL_AUTH: z.string().optional(),
	DATABASE_URL_QUEUE: z.string().optional(),
	S3_ENDPOINT: z.string(),
	S3_BUCKET: z.string().default('trunnion'),
	S3_REGION: z.string().default('us-east-1'),
	S3_ACCESS_KEY_ID: z.string(),
	S3_SECRET_ACCESS_KEY: z.string(),
	SMTP_URL: z.string(),
	MAIL_FROM: z.string().default('Trunnion <logbook@fellmoor.example>'),
	ORIGIN: z.string().default('http://localhost:5180'),
	LAB_NAME: z.string().default('Fellmoor Engine Laboratory'),
	LAB_TIME_ZONE: z.string().default('Etc/UTC'),
	MAX_TRACE_BYTES: z.coerce
		.number()
		.int()
		.positive()
		.default(512 * 1024 * 1024)
});

type LoginName = 'owner' | 'lab' | 'client' | 'auth' | 'queue';

export interface Config {
	databaseUrl(login: LoginName): string;
	storage: { endpoint: string; bucket: string; region: string; accessKeyId: string; secretAccessKey: string };
	smtpUrl: string;
	mailFrom: string;
	origin: string;
	labName: string;
	labTimeZone: string;
	maxTraceBytes: number;
}

export function readConfig(env: NodeJS.ProcessEnv): Config {
	const read = Environment.safeParse(env);
	if (!read.success)
		throw new Error(
			`These settings are missing or wrong: ${read.error.issues.map((i) => i.path.join('.')).join(', ')}.`
		);
	const e = read.data;
	return {
		databaseUrl(login) {
			const own = e[`DATABASE_URL_${login.toUpperCase() as Uppercase<LoginName>}`];
			if (own) return own;
			if (!e.DATABASE_URL) throw new Error(`Set DATABASE_URL_${login.toUpperCase()} or DATABASE_URL.`);
			const url = new URL(e.DATABASE_URL);
			url.username = `trunnion_${login}`;
			return url.toString();
		},
		storage: {
			endpoint: e.S3_ENDPOINT,
			bucket: e.S3_BUCKET,
			region: e.S3_REGION,
			accessKeyId: e.S3_ACCESS_KEY_ID,
			secretAccessKey: e.S3_SECRET_ACCESS_KEY
		},
		smtpUrl: e.SMTP_URL,
		mailFrom: e.MAIL_FROM,
		origin: e.ORIGIN,
		labName: e.LAB_NAME,
		labTimeZone: e.LAB_TIME_ZONE,
		maxTraceBytes: e.MAX_TRACE_BYTES
	};
}

/** Secrets never reach the log: only named fields are written, and these paths are cut out. */
export const log = pino({
	level: process.env.LOG_LEVEL ?? 'info',
	redact: [
		'password',
		'token',
		'secret',
		'*.password',
		'*.token',
		'*.secret',
		'headers.authorization',
		'headers.cookie'
	]
});
