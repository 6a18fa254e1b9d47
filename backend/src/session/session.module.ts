import { Global, Module } from '@nestjs/common';
import { APP_GUARD } from '@nestjs/core';
import { JwtModule } from '@nestjs/jwt';
import { PassportModule } from '@nestjs/passport';
import { Compute } from '../platform/compute';
import { Secrets } from '../platform/secrets';
import { SignInAttempts } from './attempts';
import { JwtStrategy } from './jwt.strategy';
import { Passwords } from './passwords';
import { SessionController } from './session.controller';
import { SessionGuard } from './session.guard';
import { SessionService } from './session.service';

/** Has threads of its own, so that a sign-in does not wait behind fits. */
@Global()
@Module({
  imports: [
    PassportModule,
    JwtModule.registerAsync({ inject: [Secrets], useFactory: (secrets: Secrets) => ({ secret: secrets.tokenSecret, signOptions: { expiresIn: '10m', algorithm: 'HS256' as const } }) }),
  ],
  controllers: [SessionController],
  providers: [Compute, SessionService, SignInAttempts, Passwords, JwtStrategy, { provide: APP_GUARD, useClass: SessionGuard }],
  exports: [SessionService, Passwords],
})
export class SessionModule {}
