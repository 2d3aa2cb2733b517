import { Module } from '@nestjs/common';
import { CONFIG } from '../config/config.module.js';
import type { Config } from '../config/config.schema.js';
import { RigStoreModule } from '../rigs/rig-store.module.js';
import { Mailer, NoMailer, SmtpMailer } from './mailer.js';
import { TripNotifier } from './trip-notifier.js';

/** Tells people of trips; hears of them through the feed of the rig hosts. */
@Module({
  imports: [RigStoreModule],
  providers: [
    TripNotifier,
    {
      provide: Mailer,
      inject: [CONFIG],
      useFactory: (config: Config) => (config.mail === null ? new NoMailer() : new SmtpMailer(config.mail)),
    },
  ],
})
export class NotificationsModule {}
