import type { HandleServerError } from '@sveltejs/kit';
import { logger } from './logger';

/** Logs an unexpected fault under an id and gives the page that id instead of the fault. */
export const reportError: HandleServerError = ({ error, event, status, message }) => {
	if (status === 404) return { message: 'Not found' };
	const errorId = event.locals.requestId ?? crypto.randomUUID();
	logger().error({
		errorId,
		route: event.route.id ?? 'none',
		status,
		fault: error instanceof Error ? `${error.name}: ${describe(error)}` : message,
		stack:
			error instanceof Error
				? error.stack
						?.split('\n')
						.filter((line) => /^\s+at /.test(line))
						.slice(0, 8)
				: undefined
	});
	return { message: 'Something went wrong on our side', errorId };
};

/** Query errors carry the parameters, which may be personal: keep the cause's code only. */
function describe(error: Error): string {
	const cause = error.cause as { code?: string; constraint_name?: string } | undefined;
	if (cause?.code) return `database ${cause.code} ${cause.constraint_name ?? ''}`.trim();
	return error.message.split('\n')[0]?.slice(0, 200) ?? '';
}
