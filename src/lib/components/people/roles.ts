/** The six roles as a list to choose from, with what each is for. */
export const ROLE_CHOICES = [
	{ value: 'admin', label: 'admin · keeps people and settings' },
	{ value: 'manager', label: 'manager · owns the cells' },
	{ value: 'engineer', label: 'engineer · plans tests, owns figures' },
	{ value: 'builder', label: 'builder · prepares engines' },
	{ value: 'operator', label: 'operator · runs the cell' },
	{ value: 'client', label: 'client · the customer’s engineer' }
] as const;
