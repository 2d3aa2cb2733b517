import { z } from 'zod';
import type { BenchDefinition } from '../kit/bench-definition.js';
import { stringCommands } from './string-commands.js';
import { StringModel } from './string-model.js';
import { profiles } from './weather.js';

const profileSchema = z.enum(profiles, `Give one of ${profiles.join(', ')}.`).default('cloud');

/** The photovoltaic string as a program and behind any face. */
export const stringBench: BenchDefinition<StringModel> = {
  name: 'string',
  title: 'Photovoltaic string on a DC/DC converter',
  wire: { kind: 'serial-text', commands: stringCommands },
  speed: 1,
  nanValue: 'power',
  ownOptions: {
    profile: {
      schema: profileSchema,
      usage: `${profiles.join('|')}: what light falls on it (default cloud)`,
    },
  },
  ownFaults: [
    {
      name: 'shadow',
      what: 'a shadow falls on two of the modules, until it is over',
      begin: (model) => model.castShadow(true),
      end: (model) => model.castShadow(false),
    },
  ],
  makeModel: (settings, own) =>
    new StringModel({ ...settings, profile: profileSchema.parse(own['profile']) }),
};
