/**
 * Version of the engine's numbers. It is stored with every decision and raised whenever the same
 * inputs may give another answer.
 */
export const ENGINE_VERSION = '1.1.0';
