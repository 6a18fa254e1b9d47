import { Module } from '@nestjs/common';
import { VerifyController } from './verify.controller';
import { VerifyLimit } from './verify-limit.guard';
import { VerifyService } from './verify.service';

@Module({ controllers: [VerifyController], providers: [VerifyService, VerifyLimit] })
export class VerifyModule {}
