import { Controller, Sse } from '@nestjs/common';
import { Observable } from 'rxjs';
import { Action, CurrentPerson, type Caller } from '../session/caller';
import { EventsService, type Message } from './events.service';

/** Server-sent events; the access token comes in the header as everywhere, so clients read the stream with fetch. */
@Controller('events')
export class EventsController {
  constructor(private readonly events: EventsService) {}

  @Sse()
  @Action('events.read')
  stream(@CurrentPerson() me: Caller): Observable<Message> {
    return this.events.stream(me);
  }
}
