import { Module } from '@nestjs/common';
import { AdapterRegistry, listSerialPorts } from '@cresthold/adapters';
import { adapterRegistryProvider } from './adapter-registry.provider.js';
import { AdaptersController } from './adapters.controller.js';
import { SerialPortsPort } from './serial-ports.port.js';

/** Loads the adapters once, for every module that needs them. */
@Module({
  controllers: [AdaptersController],
  providers: [
    adapterRegistryProvider,
    { provide: SerialPortsPort, useValue: { list: () => listSerialPorts() } },
  ],
  exports: [AdapterRegistry],
})
export class AdaptersModule {}
