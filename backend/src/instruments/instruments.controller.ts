import { Controller, Get, Patch, Post } from '@nestjs/common';
import { changeInstrument, instrument, instrumentQuery, newCalibration, newInstrument } from '@strainwright/common/contract/instruments';
import { page } from '@strainwright/common/contract/wire';
import type { z } from 'zod';
import { Answers, FromBody, FromId, FromQuery } from '../platform/contract/from';
import { Action, CurrentPerson, type Caller } from '../session/caller';
import { InstrumentsService } from './instruments.service';

@Controller('instruments')
export class InstrumentsController {
  constructor(private readonly instruments: InstrumentsService) {}

  @Get()
  @Action('instruments.read')
  @Answers(page(instrument))
  list(@FromQuery(instrumentQuery) query: z.infer<typeof instrumentQuery>) {
    return this.instruments.list(query);
  }

  @Get(':id')
  @Action('instruments.read')
  @Answers(instrument)
  one(@FromId('instrument') id: string) {
    return this.instruments.one(id);
  }

  @Post()
  @Action('instruments.change')
  @Answers(instrument, 201)
  add(@FromBody(newInstrument) body: z.infer<typeof newInstrument>, @CurrentPerson() caller: Caller) {
    return this.instruments.add(body, caller);
  }

  @Patch(':id')
  @Action('instruments.change')
  @Answers(instrument)
  change(@FromId('instrument') id: string, @FromBody(changeInstrument) body: z.infer<typeof changeInstrument>, @CurrentPerson() caller: Caller) {
    return this.instruments.change(id, body, caller);
  }

  @Post(':id/calibrations')
  @Action('instruments.change')
  @Answers(instrument, 201)
  calibrate(@FromId('instrument') id: string, @FromBody(newCalibration) body: z.infer<typeof newCalibration>, @CurrentPerson() caller: Caller) {
    return this.instruments.calibrate(id, body, caller);
  }
}
