import { Body, Controller, Get, Ip, Post } from '@nestjs/common';
import { ApiCreatedResponse, ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import { Roles } from '../auth/access.decorator.js';
import { userSchema, type User } from '../users/dto/user.dto.js';
import { setupSchema, setupStateSchema, type Setup, type SetupState } from './dto/setup.dto.js';
import { SetupService } from './setup.service.js';

@ApiTags('setup')
@Controller('setup')
export class SetupController {
  constructor(private readonly setup: SetupService) {}

  @Get()
  @Roles('anyone')
  @ApiOperation({ summary: 'Says whether the first administrator is still to be made.' })
  @ApiOkResponse({ standardSchema: setupStateSchema })
  async state(): Promise<SetupState> {
    return { isNeeded: await this.setup.isNeeded() };
  }

  @Post()
  @Roles('anyone')
  @ApiOperation({ summary: 'Makes the first administrator with the code that the server printed.' })
  @ApiCreatedResponse({ standardSchema: userSchema })
  setUp(@Body({ schema: setupSchema }) body: Setup, @Ip() address: string): Promise<User> {
    return this.setup.setUp(body, address);
  }
}
