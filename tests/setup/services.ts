import { z } from 'zod';

const Given = z.object({
	TRUNNION_TEST_HOME: z.string(),
	TRUNNION_TEST_SUPERUSER_URL: z.string(),
	TRUNNION_TEST_TEMPLATE: z.string(),
	TRUNNION_TEST_ENV: z.string()
});

export interface TestServices {
	/** The folder of this test run. */
	home: string;
	superuserUrl: string;
	/** The migrated database that each test's own is copied from. */
	template: string;
	/** The application's environment for these services. */
	env: Record<string, string>;
}

/** What `npm test` stood up. */
export function testServices(): TestServices {
	const given = Given.safeParse(process.env);
	if (!given.success)
		throw new Error('These tests need their services: npm test -- --only integration tests/integration/….');
	return {
		home: given.data.TRUNNION_TEST_HOME,
		superuserUrl: given.data.TRUNNION_TEST_SUPERUSER_URL,
		template: given.data.TRUNNION_TEST_TEMPLATE,
		env: z.record(z.string(), z.string()).parse(JSON.parse(given.data.TRUNNION_TEST_ENV))
	};
}
