import type { DynamicModule } from '@nestjs/common';
import { FitInputs } from './fit.inputs';
import { FitWorkerModule } from './fit-worker.module';

/** What takes fits from the queue in this process: inputs from the database, computation in worker threads. */
export function fitWorker(): DynamicModule {
  return FitWorkerModule.with({
    inject: [FitInputs],
    useFactory: (inputs: FitInputs) => ({ taskFile: require.resolve('./fit.task'), load: (fitId) => inputs.load(fitId) }),
  }, [FitInputs]);
}
