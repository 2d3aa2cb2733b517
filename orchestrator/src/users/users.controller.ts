import { Body, Controller, Get, Param, Patch, Post, Query, Res } from '@nestjs/common';
import { ApiCreatedResponse, ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import { Roles } from '../auth/access.decorator.js';
import { CurrentUser, type SignedInUser } from '../auth/signed-in-user.js';
import { setLocation } from '../http/set-location.js';
import { pageQuerySchema, type Page, type PageQuery } from '../paging/page.js';
import {
  changeUserSchema,
  createUserSchema,
  userPageSchema,
  userSchema,
  type ChangeUser,
  type CreateUser,
  type User,
} from './dto/user.dto.js';
import { UsersService } from './users.service.js';

@ApiTags('users')
@Controller('users')
export class UsersController {
  constructor(private readonly users: UsersService) {}

  @Get()
  @Roles('administrator')
  @ApiOperation({ summary: 'Lists accounts.' })
  @ApiOkResponse({ standardSchema: userPageSchema })
  list(@Query({ schema: pageQuerySchema }) query: PageQuery): Promise<Page<User>> {
    return this.users.list(query);
  }

  @Post()
  @Roles('administrator')
  @ApiOperation({ summary: 'Makes an account.' })
  @ApiCreatedResponse({ standardSchema: userSchema })
  async create(
    @Body({ schema: createUserSchema }) body: CreateUser,
    @CurrentUser() by: SignedInUser,
    @Res({ passthrough: true }) response: Response,
  ): Promise<User> {
    const user = await this.users.create(body, by.account);
    setLocation(response, `users/${user.account}`);
    return user;
  }

  @Patch(':account')
  @Roles('administrator')
  @ApiOperation({ summary: 'Changes an account; a new password or disabling ends its sessions.' })
  @ApiOkResponse({ standardSchema: userSchema })
  change(
    @Param('account') account: string,
    @Body({ schema: changeUserSchema }) body: ChangeUser,
    @CurrentUser() by: SignedInUser,
  ): Promise<User> {
    return this.users.change(account, body, by.account);
  }
}
