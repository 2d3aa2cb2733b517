import { ConfigError, parseConfig } from '../../src/config/config.schema.js';

const faultsOf = (environment: NodeJS.ProcessEnv): readonly string[] => {
  try {
    parseConfig(environment, '/console');
    return [];
  } catch (error) {
    if (error instanceof ConfigError) return error.faults;
    throw error;
  }
};

describe('the configuration', () => {
  it('has a default for everything', () => {
    expect(parseConfig({}, '/console')).toEqual({
      dataFolder: `${process.cwd()}/data`,
      port: 4380,
      host: '127.0.0.1',
      consoleFolder: '/console',
      isHttps: false,
      proxies: 0,
      mail: null,
      sessionIdleS: 1800,
      sessionMaxS: 43_200,
      isSecondFactorNeeded: false,
      station: '',
      plugIns: [],
    });
  });

  it('lists all faults at once, each with its variable', () => {
    const faults = faultsOf({
      CRESTHOLD_PORT: '70000',
      CRESTHOLD_HTTPS: 'maybe',
      CRESTHOLD_SMTP_URL: 'http://mail.example',
      CRESTHOLD_MAIL_TO: 'officer@station.example, not an address',
    });
    const variables = faults.map((fault) => /^CRESTHOLD_\w+/.exec(fault)?.[0]);
    expect(new Set(variables)).toEqual(
      new Set(['CRESTHOLD_PORT', 'CRESTHOLD_HTTPS', 'CRESTHOLD_SMTP_URL', 'CRESTHOLD_MAIL_TO']),
    );
  });

  it('asks for sender and receivers where there is a mail server', () => {
    expect(faultsOf({ CRESTHOLD_SMTP_URL: 'smtp://mail.example' })).toHaveLength(2);
    const { mail } = parseConfig(
      {
        CRESTHOLD_SMTP_URL: 'smtp://mail.example:2525',
        CRESTHOLD_MAIL_FROM: 'cresthold@station.example',
        CRESTHOLD_MAIL_TO: 'officer@station.example, engineer@station.example',
      },
      '/console',
    );
    expect(mail?.tripRecipients).toEqual(['officer@station.example', 'engineer@station.example']);
  });

  it('takes a variable set to nothing as not set', () => {
    expect(parseConfig({ CRESTHOLD_PORT: '' }, '/console').port).toBe(4380);
  });
});
