import { Module } from '@nestjs/common';
import { FirstAdministrator } from './first-administrator';
import { PeopleController } from './people.controller';
import { PeopleService } from './people.service';

@Module({ controllers: [PeopleController], providers: [PeopleService, FirstAdministrator], exports: [PeopleService, FirstAdministrator] })
export class PeopleModule {}
