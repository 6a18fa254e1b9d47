import type { Type } from '@nestjs/common';
import { CertificatesModule } from './certificates/certificates.module';
import { CustomersModule } from './customers/customers.module';
import { DocsModule } from './docs/docs.module';
import { EventsModule } from './events/events.module';
import { FindModule } from './find/find.module';
import { HealthModule } from './health/health.module';
import { InstrumentsModule } from './instruments/instruments.module';
import { LaboratoryModule } from './laboratory/laboratory.module';
import { MethodsModule } from './methods/methods.module';
import { OrdersModule } from './orders/orders.module';
import { PeopleModule } from './people/people.module';
import { ReadingsModule } from './readings/readings.module';
import { RecordModule } from './record/record.module';
import { ReferenceChecksModule } from './reference-checks/reference-checks.module';
import { SamplesModule } from './samples/samples.module';
import { SessionModule } from './session/session.module';
import { SpecimensModule } from './specimens/specimens.module';
import { RunsModule } from './runs/runs.module';
import { FitsModule } from './fits/fits.module';
import { DeterminationsModule } from './determinations/determinations.module';
import { VerifyModule } from './verify/verify.module';
import { WorklistModule } from './worklist/worklist.module';

/** One module a noun of the product. */
export const FEATURES: Type[] = [
  HealthModule,
  DocsModule,
  SessionModule,
  RecordModule,
  EventsModule,
  LaboratoryModule,
  PeopleModule,
  CustomersModule,
  OrdersModule,
  SamplesModule,
  SpecimensModule,
  ReadingsModule,
  InstrumentsModule,
  MethodsModule,
  ReferenceChecksModule,
  RunsModule,
  FitsModule,
  DeterminationsModule,
  CertificatesModule,
  VerifyModule,
  FindModule,
  WorklistModule,
];
