/** A worker whose look-up finds nothing: shows that the run notices what the look-up is for. */
import { runWorkerProcess } from '#server/tasks/workerProcess';

await runWorkerProcess({ lookUp: () => Promise.resolve([]) });
