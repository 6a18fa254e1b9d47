import type { DynamicModule } from '@nestjs/common';
import { FitInputs } from './fit.inputs';
import { FitWorkerModule } from './fit-worker.module';
import type { FitSource } from './fits.processor';

/** What takes fits from the queue in this process. */
export function fitWorker(): DynamicModule {
  return FitWorkerModule.with({ inject: [FitInputs], useFactory: (inputs: FitInputs): FitSource => ({ load: (fitId) => inputs.load(fitId), taskFile: require.resolve('./fit.task') }) }, [FitInputs]);
}
