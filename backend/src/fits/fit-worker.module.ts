import { DynamicModule, Module, Provider } from '@nestjs/common';
import { Compute } from '../platform/compute';
import { FitsOutcome } from './fits.outcome';
import { FIT_SOURCE, FitsProcessor, type FitSource } from './fits.processor';

/** The worker's side of fits: in the API's process on an embedded database, in processes of its own on a server. */
@Module({})
export class FitWorkerModule {
  static with(source: { inject?: (abstract new (...args: never[]) => unknown)[]; useFactory: (...args: never[]) => FitSource }, needs: Provider[] = []): DynamicModule {
    return { module: FitWorkerModule, providers: [Compute, FitsOutcome, FitsProcessor, ...needs, { provide: FIT_SOURCE, ...source }] };
  }
}
