import { createContext } from 'svelte';
import type { DraftEditor } from './draft-editor.svelte';

/** The editor of the page, for every form of the draft. */
export const [readEditor, provideEditor] = createContext<DraftEditor>();
