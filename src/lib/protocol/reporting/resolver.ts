import type { Answer, DocumentFacts } from './document-facts';

export type Resolver = (facts: DocumentFacts) => Answer;

/** Address of a part or line of the readable protocol. */
export const at = ({ base }: DocumentFacts, anchor: string) => `${base}/protocol#${anchor}`;
