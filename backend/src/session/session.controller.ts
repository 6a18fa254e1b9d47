import { Controller, Delete, Get, HttpCode, Post, Req, Res } from '@nestjs/common';
import { sessionAnswer, signIn, user } from '@strainwright/common/contract/people';
import type { CookieOptions, Request, Response } from 'express';
import type { z } from 'zod';
import { Config } from '../platform/config';
import { Answers, FromBody } from '../platform/contract/from';
import { Action, CurrentPerson, type Caller } from './caller';
import { OpenedSession, SessionService } from './session.service';

const COOKIE = 'strainwright_refresh';

@Controller('session')
export class SessionController {
  private readonly cookie: CookieOptions;

  constructor(private readonly session: SessionService, config: Config) {
    this.cookie = { httpOnly: true, sameSite: 'strict', path: '/api/session', secure: config.secureCookies };
  }

  @Post()
  @HttpCode(200)
  @Action('session.open')
  @Answers(sessionAnswer)
  async open(@FromBody(signIn) body: z.infer<typeof signIn>, @Req() request: Request, @Res({ passthrough: true }) response: Response) {
    return this.answer(await this.session.open(body.email, body.password, request.ip ?? 'unknown'), response);
  }

  @Post('refresh')
  @HttpCode(200)
  @Action('session.refresh')
  @Answers(sessionAnswer)
  async refresh(@Req() request: Request, @Res({ passthrough: true }) response: Response) {
    const cookies = request.cookies as Record<string, unknown>;
    const token = cookies[COOKIE];
    try {
      return this.answer(await this.session.refresh(typeof token === 'string' ? token : undefined), response);
    } catch (error) {
      response.clearCookie(COOKIE, this.cookie);
      throw error;
    }
  }

  @Get()
  @Action('session.read')
  @Answers(user)
  read(@CurrentPerson() me: Caller) {
    return this.session.user(me.id);
  }

  @Delete()
  @HttpCode(204)
  @Action('session.close')
  async close(@CurrentPerson() me: Caller, @Res({ passthrough: true }) response: Response): Promise<void> {
    await this.session.close(me);
    response.clearCookie(COOKIE, this.cookie);
  }

  private answer({ accessToken, user: who, refreshToken, expiresAt }: OpenedSession, response: Response) {
    response.cookie(COOKIE, refreshToken, { ...this.cookie, expires: expiresAt });
    response.setHeader('Cache-Control', 'no-store');
    return { accessToken, user: who };
  }
}
