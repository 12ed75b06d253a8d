import { visitsAtWork } from './cinderFlatAtWork';
import { visitsWaiting } from './cinderFlatWaiting';
import type { DemoVisit } from './scenario';

/** About 25 open jobs in all stages, and a few that have ended. */
export const cinderFlatVisits: DemoVisit[] = [...visitsAtWork, ...visitsWaiting];
