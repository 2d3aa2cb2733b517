import { Controller, HttpCode, Param, Post } from '@nestjs/common';
import { ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import type { ChannelProbe } from '@cresthold/shared';
import { Roles } from '../auth/access.decorator.js';
import { channelProbeDtoSchema } from './dto/channel-probe.dto.js';
import { RigHostsService } from './rig-hosts.service.js';

@ApiTags('rigs')
@Controller('rigs/:rigId/channels')
export class ChannelProbesController {
  constructor(private readonly hosts: RigHostsService) {}

  @Post(':channel/probe')
  @HttpCode(200)
  @Roles('test-engineer', 'technician')
  @ApiOperation({
    summary: 'Tests one channel on its wire; writes nothing.',
    description:
      'By the wiring that is saved. The device is asked while the rig is at rest; else the answer is what the scan read last.',
  })
  @ApiOkResponse({ standardSchema: channelProbeDtoSchema })
  probe(@Param('rigId') rigId: string, @Param('channel') channel: string): Promise<ChannelProbe> {
    return this.hosts.probe(rigId, channel);
  }
}
