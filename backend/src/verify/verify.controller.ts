import { rm } from 'node:fs/promises';
import { Controller, Get, HttpCode, Param, Post, UploadedFile, UseGuards, UseInterceptors } from '@nestjs/common';
import { FileInterceptor } from '@nestjs/platform-express';
import { ApiBody, ApiConsumes } from '@nestjs/swagger';
import { verification, verifyQuery, type Verification } from '@strainwright/common/contract/certificates';
import type { z } from 'zod';
import { Answers, FromQuery } from '../platform/contract/from';
import { invalid } from '../platform/problem';
import { Action } from '../session/caller';
import { LARGEST_UPLOAD, VerifyLimit } from './verify-limit.guard';
import { VerifyService } from './verify.service';

@Controller('verify')
@UseGuards(VerifyLimit)
export class VerifyController {
  constructor(private readonly verify: VerifyService) {}

  @Get(':number')
  @Action('verify.read')
  @Answers(verification)
  byCode(@Param('number') number: string, @FromQuery(verifyQuery) query: z.infer<typeof verifyQuery>): Promise<Verification> {
    return this.verify.byCode(number, query.code, query.issue);
  }

  @Post()
  @HttpCode(200)
  @Action('verify.read')
  @ApiConsumes('multipart/form-data')
  @ApiBody({ schema: { type: 'object', required: ['file'], properties: { file: { type: 'string', format: 'binary' } } } })
  @Answers(verification)
  @UseInterceptors(FileInterceptor('file', { limits: { fileSize: LARGEST_UPLOAD, files: 1, fields: 1, parts: 2 } }))
  async byFile(@UploadedFile() file: Express.Multer.File | undefined): Promise<Verification> {
    if (file === undefined) throw invalid('file', 'Choose the certificate’s PDF, spreadsheet or data file');
    try {
      return await this.verify.byFile(file.path, file.size);
    } finally {
      await rm(file.path, { force: true });
    }
  }
}
