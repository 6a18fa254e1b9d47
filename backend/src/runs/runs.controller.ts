import { Body, Controller, Get, Header, Headers, HttpCode, Post, Res, StreamableFile, UploadedFiles, UseInterceptors } from '@nestjs/common';
import { FilesInterceptor } from '@nestjs/platform-express';
import { ApiBody, ApiConsumes } from '@nestjs/swagger';
import { channelsQuery, confirmLayout, filePreview, newRun, run, runChannels, voidRun } from '@strainwright/common/contract/run-answers';
import type { Response } from 'express';
import type { z } from 'zod';
import { Database } from '../database/database';
import { Answers, FromBody, FromId, FromQuery, parseContract } from '../platform/contract/from';
import { Problem } from '../platform/problem';
import { Storage } from '../platform/storage/storage';
import { idempotencyKey } from '../readings/answered-requests';
import { Action, CurrentPerson, type Caller } from '../session/caller';
import { RunFilesService, type Upload } from './run-files.service';
import { RunsService } from './runs.service';

function jsonPart(text: unknown): unknown {
  if (typeof text !== 'string') throw new Problem(400, 'body.missing', 'The request needs a part `run` with JSON.');
  try {
    return JSON.parse(text);
  } catch {
    throw new Problem(400, 'body.unreadable', 'The part `run` is not valid JSON.');
  }
}

@Controller()
export class RunsController {
  constructor(private readonly runs: RunsService, private readonly files: RunFilesService, private readonly storage: Storage, private readonly database: Database) {}

  @Post('specimens/:id/runs')
  @Action('runs.record')
  @UseInterceptors(FilesInterceptor('files', 20))
  @ApiConsumes('multipart/form-data')
  @ApiBody({ schema: { type: 'object', properties: { run: { type: 'string', description: 'JSON of the run' }, files: { type: 'array', items: { type: 'string', format: 'binary' } } } } })
  @Answers(run, 201)
  async record(@FromId('specimen') id: string, @Body() body: { run?: unknown } | undefined, @UploadedFiles() uploads: Upload[] | undefined, @Headers('idempotency-key') key: string | undefined, @CurrentPerson() caller: Caller) {
    const given = uploads ?? [];
    try {
      return await this.runs.recordRun(id, parseContract(newRun, jsonPart(body?.run)), given, idempotencyKey(key), caller);
    } finally {
      await this.files.discard(given);
    }
  }

  @Get('runs/:id')
  @Action('runs.read')
  @Answers(run)
  one(@FromId('run') id: string) {
    return this.runs.one(id);
  }

  @Get('runs/:id/channels')
  @Action('runs.read')
  @Answers(runChannels)
  async channels(@FromId('run') id: string, @FromQuery(channelsQuery) query: z.infer<typeof channelsQuery>) {
    await this.runs.one(id);
    return this.files.channels(id, query.points);
  }

  @Post('runs/:id/void')
  @HttpCode(200)
  @Action('runs.void')
  @Answers(run)
  void(@FromId('run') id: string, @FromBody(voidRun) body: z.infer<typeof voidRun>, @CurrentPerson() caller: Caller) {
    return this.runs.void(id, body.reason, body.version, caller);
  }

  @Get('runs/:id/files/:fileId/preview')
  @Action('files.read')
  @Answers(filePreview)
  preview(@FromId('run') id: string, @FromId('file', 'fileId') fileId: string) {
    return this.files.preview(id, fileId);
  }

  @Post('runs/:id/files/:fileId/layout')
  @HttpCode(200)
  @Action('runs.record')
  @Answers(run)
  confirm(@FromId('run') id: string, @FromId('file', 'fileId') fileId: string, @FromBody(confirmLayout) body: z.infer<typeof confirmLayout>, @CurrentPerson() caller: Caller) {
    return this.runs.confirmLayout(id, fileId, body.layout, caller);
  }

  /** The raw file as it came, never shown inline. */
  @Get('runs/:id/files/:fileId/content')
  @Action('files.read')
  @Header('Content-Type', 'application/octet-stream')
  async content(@FromId('run') id: string, @FromId('file', 'fileId') fileId: string, @Res({ passthrough: true }) response: Response) {
    const file = await this.files.fileOrFail(this.database.db, id, fileId);
    response.setHeader('Content-Disposition', `attachment; filename*=UTF-8''${encodeURIComponent(file.name)}`);
    return new StreamableFile(await this.storage.get(file.sha256), { length: file.size });
  }
}
