import { Controller, Get } from '@nestjs/common';
import { ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import { AdapterRegistry } from '@cresthold/adapters';
import { Roles } from '../auth/access.decorator.js';
import type { Page } from '../paging/page.js';
import { serialPortListSchema, type SerialPort } from './dto/serial-port.dto.js';
import { adapterListSchema, toAdapter, type Adapter } from './dto/adapter.dto.js';
import { SerialPortsPort } from './serial-ports.port.js';

@ApiTags('adapters')
@Controller('adapters')
export class AdaptersController {
  constructor(
    private readonly registry: AdapterRegistry,
    private readonly serialPorts: SerialPortsPort,
  ) {}

  @Get()
  @Roles('signed-in')
  @ApiOperation({
    summary:
      'Lists the adapters, shipped and plugged in, with what they must be told; the broken ones with why.',
  })
  @ApiOkResponse({ standardSchema: adapterListSchema })
  list(): Page<Adapter> {
    // A handful at most, fixed at start: always one page.
    return { items: this.registry.listings.map(toAdapter), nextCursor: null };
  }

  @Get('serial-ports')
  @Roles('signed-in')
  @ApiOperation({ summary: 'Lists the serial ports of this machine, with what is known of them.' })
  @ApiOkResponse({ standardSchema: serialPortListSchema })
  async listSerialPorts(): Promise<Page<SerialPort>> {
    // As many as are plugged in: always one page.
    return { items: await this.serialPorts.list(), nextCursor: null };
  }
}
