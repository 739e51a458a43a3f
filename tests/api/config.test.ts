import { describe, expect, it } from 'vitest';
import { ConfigError, readConfig, servesSecurely } from '#server/config.ts';

const DATABASE_URL = 'postgres://evenline@127.0.0.1:5432/evenline';

function faultOf(environment: Record<string, string>): string {
  try {
    readConfig(environment);
  } catch (error) {
    if (error instanceof ConfigError) return error.message;
    throw error;
  }
  throw new Error('the settings were taken');
}

describe('settings', () => {
  it('default to loopback, and a blank one counts as not given', () => {
    const config = readConfig({ DATABASE_URL, HOST: '', PORT: '', PUBLIC_ORIGIN: '', TLS_CERT: '' });
    expect(config).toMatchObject({ host: '127.0.0.1', port: 4100, publicOrigin: null, trustedProxies: 0, tls: null });
    expect(servesSecurely(config)).toBe(false);
  });

  it.each([
    ['DATABASE_URL', {}],
    ['DATABASE_URL', { DATABASE_URL: 'mysql://somewhere' }],
    ['PORT', { DATABASE_URL, PORT: 'http' }],
    ['PORT', { DATABASE_URL, PORT: '70000' }],
    ['PUBLIC_ORIGIN', { DATABASE_URL, PUBLIC_ORIGIN: 'pace.example' }],
    ['PUBLIC_ORIGIN', { DATABASE_URL, PUBLIC_ORIGIN: 'https://pace.example/path' }],
    ['PUBLIC_ORIGIN', { DATABASE_URL, HOST: '0.0.0.0' }],
    ['TRUST_PROXY', { DATABASE_URL, TRUST_PROXY: 'yes' }],
    ['TLS_KEY', { DATABASE_URL, TLS_CERT: 'cert.pem' }],
    ['TLS_CERT', { DATABASE_URL, TLS_KEY: 'key.pem' }],
  ])('%s is named when it is missing or wrong: %o', (name, environment) => {
    expect(faultOf(environment as Record<string, string>)).toContain(`\n  ${name} `);
  });

  it('are all named at once', () => {
    expect(faultOf({ PORT: 'x', TRUST_PROXY: 'y' }).match(/^ {2}[A-Z_]+ /gm)).toEqual(['  PORT ', '  TRUST_PROXY ', '  DATABASE_URL ']);
  });
});
