import { Body, Controller, Get, Ip, Post } from '@nestjs/common';
import { ApiCreatedResponse, ApiOkResponse, ApiTags } from '@nestjs/swagger';
import { Roles } from '../auth/access.decorator.js';
import { userSchema, type User } from '../users/dto/user.dto.js';
import { setupSchema, setupStateSchema, type Setup, type SetupState } from './dto/setup.dto.js';
import { SetupService } from './setup.service.js';

@ApiTags('setup')
@Controller('setup')
export class SetupController {
  constructor(private readonly setup: SetupService) {}

  /** Says whether the first administrator is still to be made. */
  @Get()
  @Roles('anyone')
  @ApiOkResponse({ standardSchema: setupStateSchema })
  async state(): Promise<SetupState> {
    return { isNeeded: await this.setup.isNeeded() };
  }

  /** Makes the first administrator with the code that the server printed. */
  @Post()
  @Roles('anyone')
  @ApiCreatedResponse({ standardSchema: userSchema })
  setUp(@Body({ schema: setupSchema }) body: Setup, @Ip() address: string): Promise<User> {
    return this.setup.setUp(body, address);
  }
}
