import { Body, Controller, HttpCode, Param, Post } from '@nestjs/common';
import { ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import { Roles } from '../auth/access.decorator.js';
import {
  envelopeReplayOrderSchema,
  envelopeReplaySchema,
  type EnvelopeReplayAnswer,
  type EnvelopeReplayOrder,
} from './dto/envelope-replay.dto.js';
import { EnvelopeReplayService } from './envelope-replay.service.js';

@ApiTags('envelopes')
@Controller('rigs/:rigId/envelopes')
export class EnvelopeReplayController {
  constructor(private readonly replays: EnvelopeReplayService) {}

  @Post('replay')
  @HttpCode(200)
  @Roles('signed-in')
  @ApiOperation({
    summary: 'What a draft would have done in recorded runs; saves nothing.',
    description: 'On the named runs, or on the last ended ones of the rig.',
  })
  @ApiOkResponse({ standardSchema: envelopeReplaySchema })
  replay(
    @Param('rigId') rigId: string,
    @Body({ schema: envelopeReplayOrderSchema }) order: EnvelopeReplayOrder,
  ): Promise<EnvelopeReplayAnswer> {
    return this.replays.replay(rigId, order);
  }
}
