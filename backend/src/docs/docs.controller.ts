import { createReadStream } from 'node:fs';
import { dirname, join } from 'node:path';
import { Controller, Get, Header, Param, StreamableFile } from '@nestjs/common';
import { ApiExcludeController } from '@nestjs/swagger';
import { notFound } from '../platform/problem';
import { Action } from '../session/caller';
import { ApiDocument } from './api-document';

const FILES: Readonly<Record<string, string>> = { 'swagger-ui.css': 'text/css', 'swagger-ui-bundle.js': 'text/javascript', 'favicon-32x32.png': 'image/png' };

const PAGE = `<!doctype html>
<html lang="en"><head><meta charset="utf-8"><title>Strainwright API</title>
<link rel="icon" href="/api/docs/favicon-32x32.png"><link rel="stylesheet" href="/api/docs/swagger-ui.css"></head>
<body><div id="document"></div><script src="/api/docs/swagger-ui-bundle.js"></script><script src="/api/docs/show.js"></script></body></html>`;

const SHOW = `SwaggerUIBundle({ url: '/api/docs/document.json', dom_id: '#document', deepLinking: true });`;

/** The API document and the page that shows it; every file from this origin, no inline script. */
@Controller('docs')
@ApiExcludeController()
@Action('document.read')
export class DocsController {
  constructor(private readonly document: ApiDocument) {}

  @Get()
  @Header('Content-Type', 'text/html; charset=utf-8')
  page(): string {
    return PAGE;
  }

  @Get('show.js')
  @Header('Content-Type', 'text/javascript; charset=utf-8')
  script(): string {
    return SHOW;
  }

  @Get('document.json')
  json() {
    return this.document.get();
  }

  @Get(':file')
  file(@Param('file') name: string): StreamableFile {
    const type = Object.hasOwn(FILES, name) ? FILES[name] : undefined;
    if (type === undefined) throw notFound('file');
    return new StreamableFile(createReadStream(join(dirname(require.resolve('swagger-ui-dist/package.json')), name)), { type });
  }
}
