import { DynamicModule, Module } from '@nestjs/common';
import { APP_FILTER, DiscoveryModule } from '@nestjs/core';
import { MulterModule } from '@nestjs/platform-express';
import { Database } from './database/database';
import { FEATURES } from './features';
import { Config } from './platform/config';
import { PlatformModule } from './platform/platform.module';
import { ProblemFilter } from './platform/problem.filter';
import { QueueModule } from './platform/queue/queue.module';
import { Storage } from './platform/storage/storage';
import { uploadOptions } from './platform/storage/uploads';

/** The whole program. `worker` adds what takes fits from the queue. */
@Module({})
export class AppModule {
  static with(config: Config, database: Database, worker: DynamicModule | undefined): DynamicModule {
    const uploads = MulterModule.registerAsync({ inject: [Storage], useFactory: (storage: Storage) => uploadOptions(storage.incoming) });
    return {
      module: AppModule,
      imports: [PlatformModule.with(config, database), DiscoveryModule, QueueModule, { ...uploads, global: true }, ...FEATURES, ...(worker === undefined ? [] : [worker])],
      providers: [{ provide: APP_FILTER, useClass: ProblemFilter }],
    };
  }
}
