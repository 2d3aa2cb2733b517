import { channelProbeSchema } from '@cresthold/shared';

export const channelProbeDtoSchema = channelProbeSchema.meta({ id: 'ChannelProbe' });
