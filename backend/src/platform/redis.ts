import { Logger, type OnApplicationShutdown } from '@nestjs/common';
import type { Redis } from 'ioredis';
import type { Config } from './config';

/** Counters and the fan-out of events. Without REDIS_URL they live in this process. */
export class RedisConnections implements OnApplicationShutdown {
  private constructor(
    /** For commands. */
    readonly commands: Redis,
    /** For subscriptions, which take a connection of their own. */
    readonly subscriber: Redis,
  ) {}

  static async open(config: Config): Promise<RedisConnections> {
    const commands = config.redisUrl === undefined ? await inProcess() : await connect(config.redisUrl);
    const subscriber = commands.duplicate();
    const logger = new Logger('Redis');
    for (const connection of [commands, subscriber]) connection.on('error', (error) => logger.warn(error.message));
    return new RedisConnections(commands, subscriber);
  }

  onApplicationShutdown(): void {
    this.subscriber.disconnect();
    this.commands.disconnect();
  }
}

/* Each of the two packages is loaded only where it is used. */
async function connect(url: string): Promise<Redis> {
  const { Redis: Client } = await import('ioredis');
  return new Client(url, { maxRetriesPerRequest: 3 });
}

let made = 0;

async function inProcess(): Promise<Redis> {
  const { default: Mock } = await import('ioredis-mock');
  made += 1;
  // Mocks of the same port share their data: each application gets its own.
  return new Mock({ host: 'in-process', port: made });
}
