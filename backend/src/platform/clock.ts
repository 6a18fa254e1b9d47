import { Injectable } from '@nestjs/common';

/** The only wall clock; tests put their own in its place. */
@Injectable()
export class Clock {
  private behind = 0;

  now(): Date {
    return new Date(Date.now() - this.behind);
  }

  /** The demo tells what happened over weeks: it puts the clock back before anyone is served, and to rights (0) after. */
  putBack(milliseconds: number): void {
    this.behind = milliseconds;
  }

  /** Today's date where the laboratory is, as YYYY-MM-DD. */
  today(timeZone: string): string {
    const parts = new Intl.DateTimeFormat('en-CA', { timeZone, year: 'numeric', month: '2-digit', day: '2-digit' }).formatToParts(this.now());
    const part = (type: string) => parts.find((p) => p.type === type)?.value ?? '';
    return `${part('year')}-${part('month')}-${part('day')}`;
  }
}
