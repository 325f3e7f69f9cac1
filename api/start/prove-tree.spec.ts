import { carriedEnvironment, debianSources } from './prove-tree';

describe('the sources that the bare tree is made from', () => {
  const lines = [
    'Debian|bookworm|http://mirror.example/debian/|main',
    'Debian|bookworm|http://mirror.example/debian/|main',
    'Debian|bookworm-security|http://mirror.example/security/|main',
    'Someone|stable|http://other.example/|main',
    'Debian|trixie|http://mirror.example/debian/|main',
  ];

  it('are those of Debian bookworm that this machine has, once each', () =>
    expect(debianSources(lines.join('\n'))).toEqual([
      { uri: 'http://mirror.example/debian/', suite: 'bookworm', component: 'main' },
      { uri: 'http://mirror.example/security/', suite: 'bookworm-security', component: 'main' },
    ]));
  it('are asked for when there are none', () => expect(() => debianSources(lines.slice(2).join('\n'))).toThrow(/apt-get update/));
});

describe('what is carried over', () => {
  it('is how to reach the net, and nothing else of this machine', () =>
    expect(carriedEnvironment({ https_proxy: 'a', HTTP_PROXY: 'b', NODE_EXTRA_CA_CERTS: 'c', DATABASE_URL: 'd', HOME: 'e' })).toEqual({
      https_proxy: 'a',
      HTTP_PROXY: 'b',
      NODE_EXTRA_CA_CERTS: 'c',
    }));
});
