import type { Type } from '@nestjs/common';
import { EventsModule } from './events/events.module';
import { HealthModule } from './health/health.module';
import { LaboratoryModule } from './laboratory/laboratory.module';
import { PeopleModule } from './people/people.module';
import { RecordModule } from './record/record.module';
import { SessionModule } from './session/session.module';

/** One module a noun of the product. */
export const FEATURES: Type[] = [
  HealthModule,
  SessionModule,
  RecordModule,
  EventsModule,
  LaboratoryModule,
  PeopleModule,
];
