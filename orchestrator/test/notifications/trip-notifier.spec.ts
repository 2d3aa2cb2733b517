import type { Trip } from '@cresthold/shared';
import { SmtpMailer } from '../../src/notifications/mailer.js';
import { TripNotifier } from '../../src/notifications/trip-notifier.js';
import { HostFeed } from '../../src/rig-hosts/host-feed.js';
import { createTestServer, type TestServer } from '../server/create-test-server.js';
import { rigInput } from '../server/documents.js';
import { SmtpFake } from './smtp-fake.js';

const trip: Trip = {
  cause: 'interlock:co-high',
  message: 'Too much CO: open the air.',
  at: '2026-01-01T00:00:00.000Z',
  by: null,
  later: [],
};
const mailOf = (smtpUrl: string) => ({
  smtpUrl,
  from: 'cresthold@station.example',
  tripRecipients: ['officer@station.example', 'engineer@station.example'],
});

describe('the mail about a trip', () => {
  let smtp: SmtpFake;
  let server: TestServer;

  beforeEach(async () => {
    smtp = await SmtpFake.listen();
    server = await createTestServer({ mail: mailOf(smtp.url) });
    const engineer = await server.as('engineer', 'test-engineer');
    await engineer.post('/api/v1/rigs').send(rigInput()).expect(201);
  });
  afterEach(async () => {
    await server.close();
    await smtp.close();
  });

  it('goes to everybody who is to hear of it, with rig and first cause', async () => {
    await server.app.get(TripNotifier).notify('kiln-1', trip);
    const [mail] = smtp.mails;
    expect(mail?.from).toBe('cresthold@station.example');
    expect(mail?.to).toEqual(['officer@station.example', 'engineer@station.example']);
    expect(mail?.data).toContain('Subject: Cresthold: Kiln 1 has tripped');
    expect(mail?.data).toContain('interlock:co-high');
    expect(mail?.data).toContain('no alarm to rely on');
  });

  it('is sent for a trip that a rig host tells', async () => {
    server.app.get(HostFeed).trips.next({ rigId: 'kiln-1', trip });
    while (smtp.mails.length === 0) await new Promise((resolve) => setTimeout(resolve, 10));
    expect(smtp.mails).toHaveLength(1);
  });

  it('cannot be bent by the title of a rig', async () => {
    const engineer = await server.as('engineer', 'test-engineer');
    const title = 'Kiln\r\nBcc: everybody@station.example\r\n\r\nhello';
    await engineer
      .post('/api/v1/rigs')
      .send(rigInput({ id: 'kiln-2', title }))
      .expect(201);
    await server.app.get(TripNotifier).notify('kiln-2', trip);
    expect(smtp.mails[0]?.to).toHaveLength(2);
    expect(smtp.mails[0]?.data.split('\n\n')[0]).not.toMatch(/^Bcc:/m);
  });

  it('fails as a value where the mail server is gone: nothing waits for it', async () => {
    const gone = await SmtpFake.listen();
    const { url } = gone;
    await gone.close();
    const mailer = new SmtpMailer(mailOf(url));
    await expect(mailer.send({ to: ['officer@station.example'], subject: 's', text: 't' })).rejects.toThrow();
    mailer.close();
  });
});
