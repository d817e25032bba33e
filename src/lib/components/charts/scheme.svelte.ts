import type { Scheme } from '../theme/tokens';

/** Light or dark as shown right now, for what is painted on canvas; follows the system and the switch. */
export class SchemeWatch {
	current = $state<Scheme>('light');

	constructor() {
		$effect(() => {
			const system = matchMedia('(prefers-color-scheme: dark)');
			const root = document.documentElement;
			const read = () => {
				const chosen = root.dataset.theme;
				const fallback = system.matches ? 'dark' : 'light';
				this.current = chosen === 'light' || chosen === 'dark' ? chosen : fallback;
			};
			read();
			system.addEventListener('change', read);
			const attribute = new MutationObserver(read);
			attribute.observe(root, { attributeFilter: ['data-theme'] });
			return () => {
				system.removeEventListener('change', read);
				attribute.disconnect();
			};
		});
	}
}
