import { TASK_LIMITS } from '../../../schemas/task-input';
import { ServiceError } from '../../errors';

/** @throws ServiceError invalid when it is too long; whether one is needed is the step's to say */
export function readReason(reason: string): string {
	const text = reason.trim();
	if (text.length <= TASK_LIMITS.instructions) return text;
	const limit = TASK_LIMITS.instructions.toLocaleString('en');
	const message = `At most ${limit} characters fit here; this text has ${text.length.toLocaleString('en')}.`;
	throw new ServiceError('invalid', message, [{ field: 'reason', message }]);
}
