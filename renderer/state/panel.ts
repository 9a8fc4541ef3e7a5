import { signal } from '@preact/signals';

export type Panel = 'sheet' | 'result' | 'log' | 'cautions';

/** What is shown beside the picture. */
export const panel = signal<Panel>('sheet');
/** Height of the lanes under the picture [CSS px]. */
export const lanesHeightPx = signal(Math.round(window.innerHeight * 0.38));
