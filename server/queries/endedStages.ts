import { ENDED } from '#shared/domain/stages';

/** The stages that end a job, as a list for SQL: one table says which they are. */
export const ENDED_LIST = ENDED.map((stage) => `'${stage}'`).join(', ');
