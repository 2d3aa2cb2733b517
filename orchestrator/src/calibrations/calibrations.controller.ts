import {
  Body,
  Controller,
  Get,
  Headers,
  HttpCode,
  Param,
  Post,
  Put,
  Query,
  Res,
  StreamableFile,
} from '@nestjs/common';
import {
  ApiBody,
  ApiConsumes,
  ApiCreatedResponse,
  ApiOkResponse,
  ApiOperation,
  ApiProduces,
  ApiTags,
} from '@nestjs/swagger';
import type { Response } from 'express';
import { Roles } from '../auth/access.decorator.js';
import { CurrentUser, type SignedInUser } from '../auth/signed-in-user.js';
import { setLocation } from '../http/set-location.js';
import type { Page } from '../paging/page.js';
import { CalibrationsService } from './calibrations.service.js';
import { CertificatesService, certificateTypes } from './certificates.service.js';
import {
  calibrationPageSchema,
  calibrationQuerySchema,
  calibrationSchema,
  calibrationWithdrawalSchema,
  certificateFileSchema,
  newCalibrationSchema,
  type Calibration,
  type CalibrationQuery,
  type CalibrationWithdrawal,
  type CertificateFile,
  type NewCalibration,
} from './dto/calibration.dto.js';

@ApiTags('calibrations')
@Controller()
export class CalibrationsController {
  constructor(
    private readonly calibrations: CalibrationsService,
    private readonly certificates: CertificatesService,
  ) {}

  @Get('rigs/:rigId/calibrations')
  @Roles('signed-in')
  @ApiOperation({ summary: 'Lists the calibrations of a rig, newest first.' })
  @ApiOkResponse({ standardSchema: calibrationPageSchema })
  list(
    @Param('rigId') rigId: string,
    @Query({ schema: calibrationQuerySchema }) query: CalibrationQuery,
  ): Promise<Page<Calibration>> {
    return this.calibrations.list(rigId, query);
  }

  @Post('rigs/:rigId/calibrations')
  @Roles('test-engineer', 'safety-officer')
  @ApiOperation({
    summary: 'Puts a calibration of a sensor in force.',
    description:
      'Only while the rig is at rest. Where it converts otherwise than the one before, the envelope in force is withdrawn: it was approved for other values.',
  })
  @ApiCreatedResponse({ standardSchema: calibrationSchema })
  async create(
    @Param('rigId') rigId: string,
    @Body({ schema: newCalibrationSchema }) body: NewCalibration,
    @CurrentUser() by: SignedInUser,
    @Res({ passthrough: true }) response: Response,
  ): Promise<Calibration> {
    const calibration = await this.calibrations.create(rigId, body, by.account);
    setLocation(response, `calibrations/${calibration.id}`);
    return calibration;
  }

  @Get('calibrations/:id')
  @Roles('signed-in')
  @ApiOperation({ summary: 'Reads a calibration.' })
  @ApiOkResponse({ standardSchema: calibrationSchema })
  get(@Param('id') id: string): Promise<Calibration> {
    return this.calibrations.get(id);
  }

  @Post('calibrations/:id/withdraw')
  @HttpCode(200)
  @Roles('test-engineer', 'safety-officer')
  @ApiOperation({
    summary: 'Takes a calibration out of force; withdraws the envelope in force as well.',
  })
  @ApiOkResponse({ standardSchema: calibrationSchema })
  withdraw(
    @Param('id') id: string,
    @Body({ schema: calibrationWithdrawalSchema }) { reason }: CalibrationWithdrawal,
    @CurrentUser() by: SignedInUser,
  ): Promise<Calibration> {
    return this.calibrations.withdraw(id, reason, by.account);
  }

  @Put('calibrations/:id/certificate')
  @Roles('test-engineer', 'safety-officer')
  @ApiOperation({ summary: 'Uploads the certificate, once; at most 5 MB.' })
  @ApiConsumes(...certificateTypes)
  @ApiBody({ schema: { type: 'string', format: 'binary' } })
  @ApiOkResponse({ standardSchema: certificateFileSchema })
  putCertificate(
    @Param('id') id: string,
    @Headers('content-type') mediaType: string | undefined,
    @Body() data: unknown,
    @CurrentUser() by: SignedInUser,
  ): Promise<CertificateFile> {
    const bytes = Buffer.isBuffer(data) ? data : Buffer.alloc(0);
    return this.certificates.put(id, mediaType?.split(';')[0] ?? '', bytes, by.account);
  }

  @Get('calibrations/:id/certificate')
  @Roles('signed-in')
  @ApiOperation({ summary: 'Downloads the certificate.' })
  @ApiProduces(...certificateTypes)
  @ApiOkResponse({ content: { 'application/pdf': { schema: { type: 'string', format: 'binary' } } } })
  async getCertificate(@Param('id') id: string): Promise<StreamableFile> {
    const { mediaType, data } = await this.certificates.get(id);
    const name = `certificate-${id}.${mediaType.split('/')[1] ?? 'bin'}`;
    // Never shown inside the application: a file that somebody uploaded must not run with its rights.
    return new StreamableFile(data, { type: mediaType, disposition: `attachment; filename="${name}"` });
  }
}
