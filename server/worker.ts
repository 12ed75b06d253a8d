import { runWorkerProcess } from '#server/tasks/workerProcess';

await runWorkerProcess();
