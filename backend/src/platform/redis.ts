import { Injectable, OnApplicationShutdown } from '@nestjs/common';
import type { Redis } from 'ioredis';
import { Config } from './config';

/** Counters and the fan-out of events. Without REDIS_URL they live in this process. */
@Injectable()
export class RedisConnections implements OnApplicationShutdown {
  /** For commands. */
  readonly commands: Redis;
  /** For subscriptions, which take a connection of their own. */
  readonly subscriber: Redis;

  constructor(config: Config) {
    this.commands = connect(config.redisUrl);
    this.subscriber = this.commands.duplicate();
  }

  onApplicationShutdown(): void {
    this.subscriber.disconnect();
    this.commands.disconnect();
  }
}

let inProcess = 0;

/* The two packages are loaded as they are needed: one of them never is. */
function connect(url: string | undefined): Redis {
  if (url !== undefined) {
    const { Redis: Client } = require('ioredis') as typeof import('ioredis');
    return new Client(url, { maxRetriesPerRequest: 3 });
  }
  const Mock = require('ioredis-mock') as typeof import('ioredis-mock');
  inProcess += 1;
  // Mocks of the same port share their data: each application gets its own.
  return new Mock({ host: 'in-process', port: inProcess });
}
