import type { DynamicModule } from '@nestjs/common';

/** What takes fits from the queue in this process. */
export function fitWorker(): DynamicModule | undefined {
  return undefined;
}
