// Loaded into a program before its own code (node --import): time stands still there, so that two
// programs can be asked the same thing at the same millisecond.
const nowMs = Number(process.env.TEST_NOW_MS);
if (!Number.isSafeInteger(nowMs)) throw new RangeError('TEST_NOW_MS needs epoch milliseconds');

const RunningDate = globalThis.Date;
globalThis.Date = class extends RunningDate {
	constructor(...parts) {
		super(...(parts.length === 0 ? [nowMs] : parts));
	}
	static now() {
		return nowMs;
	}
};
