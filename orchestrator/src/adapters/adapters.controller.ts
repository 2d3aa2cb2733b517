import { Controller, Get } from '@nestjs/common';
import { ApiOkResponse, ApiOperation, ApiTags } from '@nestjs/swagger';
import { adapterSummaries } from '@cresthold/adapters';
import { Roles } from '../auth/access.decorator.js';
import type { Page } from '../paging/page.js';
import { adapterListSchema, type Adapter } from './dto/adapter.dto.js';

@ApiTags('adapters')
@Controller('adapters')
export class AdaptersController {
  @Get()
  @Roles('signed-in')
  @ApiOperation({ summary: 'Lists the installed adapters with what they must be told.' })
  @ApiOkResponse({ standardSchema: adapterListSchema })
  list(): Page<Adapter> {
    // A handful at most, fixed at start: always one page.
    return { items: adapterSummaries(), nextCursor: null };
  }
}
