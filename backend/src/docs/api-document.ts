import { Injectable, type INestApplication } from '@nestjs/common';
import type { OpenAPIObject } from '@nestjs/swagger';

/** Holds the API document: made when it is first asked for, from the application it belongs to. */
@Injectable()
export class ApiDocument {
  private app: INestApplication | undefined;
  private made: Promise<OpenAPIObject> | undefined;

  describe(app: INestApplication): void {
    this.app = app;
  }

  get(): Promise<OpenAPIObject> {
    this.made ??= this.make();
    return this.made;
  }

  private async make(): Promise<OpenAPIObject> {
    if (this.app === undefined) throw new Error('There is no application to describe');
    const { apiDocument } = await import('./document');
    return apiDocument(this.app);
  }
}
