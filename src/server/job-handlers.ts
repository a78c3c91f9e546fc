import { ACCOUNT_JOBS } from '~/features/accounts/jobs';
import { ORGANIZATION_JOBS } from '~/features/organizations/jobs';
import type { Handlers } from './jobs';

/** Every queue's handler: each feature brings its own. */
export const JOB_HANDLERS: Handlers = { ...ACCOUNT_JOBS, ...ORGANIZATION_JOBS };
