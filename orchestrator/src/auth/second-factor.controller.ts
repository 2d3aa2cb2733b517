import { Body, Controller, Get, HttpCode, Ip, Post } from '@nestjs/common';
import { ApiNoContentResponse, ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import { Roles } from './access.decorator.js';
import {
  confirmationSchema,
  enrolmentSchema,
  recoveryCodesSchema,
  secondFactorSchema,
  type Confirmation,
  type Enrolment,
  type RecoveryCodes,
  type SecondFactor,
} from './dto/second-factor.dto.js';
import { reauthenticationSchema, type Reauthentication } from './dto/session.dto.js';
import { SecondFactorService } from './second-factor.service.js';
import { CurrentUser, type SignedInUser } from './signed-in-user.js';

/** One's own authenticator (time-based codes, RFC 6238). */
@ApiTags('auth')
@Controller('auth/second-factor')
export class SecondFactorController {
  constructor(private readonly factor: SecondFactorService) {}

  @Get()
  @Roles('signed-in')
  @ApiOperation({ summary: 'Says whether one has a second factor.' })
  @ApiOkResponse({ standardSchema: secondFactorSchema })
  state(@CurrentUser() { account }: SignedInUser): Promise<SecondFactor> {
    return this.factor.state(account);
  }

  @Post()
  @HttpCode(200)
  @Roles('signed-in')
  @ApiOperation({ summary: 'Begins: answers a new secret, shown this once, which counts after `confirm`.' })
  @ApiOkResponse({ standardSchema: enrolmentSchema })
  begin(
    @Body({ schema: reauthenticationSchema }) body: Reauthentication,
    @CurrentUser() { account }: SignedInUser,
    @Ip() address: string,
  ): Promise<Enrolment> {
    return this.factor.begin(account, body, address);
  }

  @Post('confirm')
  @HttpCode(200)
  @Roles('signed-in')
  @ApiOperation({ summary: 'Ends the set-up with a first code; answers recovery codes, shown this once.' })
  @ApiOkResponse({ standardSchema: recoveryCodesSchema })
  async confirm(
    @Body({ schema: confirmationSchema }) { code }: Confirmation,
    @CurrentUser() { account }: SignedInUser,
    @Ip() address: string,
  ): Promise<RecoveryCodes> {
    return { recoveryCodes: await this.factor.confirm(account, code, address) };
  }

  @Post('remove')
  @HttpCode(204)
  @Roles('signed-in')
  @ApiOperation({ summary: 'Removes it, with password and code.' })
  @ApiNoContentResponse()
  remove(
    @Body({ schema: reauthenticationSchema }) body: Reauthentication,
    @CurrentUser() { account }: SignedInUser,
    @Ip() address: string,
  ): Promise<void> {
    return this.factor.remove(account, body, address);
  }
}
