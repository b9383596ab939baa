import type { Uint32Stream } from '../random/random-stream.ts';

/**
 * Random words that nobody can foresee, as allocation needs them. A stream made for simulation says
 * so in its type (`purpose: 'simulation'`) and does not fit here.
 */
export type CryptographicStream = Uint32Stream & { readonly purpose?: 'allocation' };

/** Opens the random stream that belongs to a name; the same name always gives the same words. */
export type OpenStream = (name: string) => CryptographicStream;
