/** What the frame shows of who is signed in. */
export interface FramePerson {
	name: string;
	role: string;
	client: { code: string; name: string } | null;
}
