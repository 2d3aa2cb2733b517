import { Module } from '@nestjs/common';
import { AdaptersController } from './adapters.controller.js';

@Module({ controllers: [AdaptersController] })
export class AdaptersModule {}
