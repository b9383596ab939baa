import { conductAnswers } from './conduct-answers';
import { designAnswers } from './design-answers';

/** What the study can answer by itself; every checklist, registry text and pack reads from here. */
export const factAnswers = { ...designAnswers, ...conductAnswers };

export type FactName = keyof typeof factAnswers;
