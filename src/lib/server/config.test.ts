import { describe, expect, it } from 'vitest';
import { readConfig } from './config';

const DATABASE_URL = 'postgres://a:b@127.0.0.1:5432/c';

describe('the environment', () => {
  it('needs nothing but a database', () => {
    const read = readConfig({ DATABASE_URL, SMTP_URL: '', LOG_LEVEL: '' });
    expect(read).toMatchObject({ databaseUrl: DATABASE_URL, smtpUrl: null, seed: false, environment: 'development' });
    expect(read.limits.signIn).toBe(5);
  });

  it('takes what is given', () => {
    const read = readConfig({
      DATABASE_URL,
      ORIGIN: 'https://sedge.example/',
      TRUSTED_ORIGINS: 'http://localhost:1, http://localhost:2/',
      SEDGELINE_SEED: 'demo',
      SIGN_IN_LIMIT: '1000'
    });
    expect(read).toMatchObject({ origin: 'https://sedge.example', seed: true });
    expect(read.trustedOrigins).toEqual(['http://localhost:1', 'http://localhost:2']);
    expect(read.limits.signIn).toBe(1000);
  });

  it('names every variable at fault, and what it must be', () => {
    const read = () => readConfig({ ORIGIN: 'sedge', SIGN_IN_LIMIT: 'many', SMTP_URL: 'mail.example' });
    expect(read).toThrow(/DATABASE_URL is missing/);
    expect(read).toThrow(/ORIGIN must be the address people type/);
    expect(read).toThrow(/SMTP_URL must be an address such as smtp:/);
    expect(read).toThrow(/SIGN_IN_LIMIT/);
  });
});
