import { DynamicModule, Global, Module } from '@nestjs/common';
import { Database } from '../database/database';
import { Clock } from './clock';
import { Config } from './config';
import { loggingModule } from './logging';
import { Mail } from './mail';
import { RedisConnections } from './redis';
import { Secrets } from './secrets';
import { Storage } from './storage/storage';

/** Everything that touches the outside, there for every feature to ask for. */
@Global()
@Module({})
export class PlatformModule {
  /** The database is opened before, and closed after, everything that may still use it. */
  static with(config: Config, database: Database): DynamicModule {
    const provided = [{ provide: Config, useValue: config }, { provide: Database, useValue: database }, Clock, Secrets, Storage, Mail, { provide: RedisConnections, inject: [Config], useFactory: (settings: Config) => RedisConnections.open(settings) }];
    return { module: PlatformModule, imports: [loggingModule], providers: provided, exports: provided };
  }
}
