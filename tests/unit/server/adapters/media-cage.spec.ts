import { describe, expect, it } from 'vitest'
import { cageArguments } from '#server/adapters/media-cage'

const LIMITS = { wallMs: 1000, cpuSeconds: 60, outputBytes: 5_000_000, memoryBytes: 3_000_000_000 }
const BOUNDS = ['prlimit', '--as=3000000000', '--cpu=60', '--fsize=5000000', '--nofile=64', '--core=0', '--']

describe('cageArguments', () => {
  it('cuts the network, gives up privileges and drops to another user as root', () => {
    expect(cageArguments({ network: 'own', user: { uid: 65534, gid: 65534 }, isBounded: true }, LIMITS)).toEqual([
      'unshare', '-n', '--', 'setpriv', '--no-new-privs', '--pdeathsig', 'KILL', '--reuid=65534', '--regid=65534', '--clear-groups', ...BOUNDS,
    ])
  })

  it('cuts the network through a user namespace without root', () => {
    expect(cageArguments({ network: 'own-as-user', user: null, isBounded: true }, LIMITS)).toEqual(['unshare', '-r', '-n', '--', 'setpriv', '--no-new-privs', '--pdeathsig', 'KILL', ...BOUNDS])
  })

  it('keeps the bounds where no namespace is permitted', () => {
    expect(cageArguments({ network: 'shared', user: null, isBounded: true }, LIMITS)).toEqual(['setpriv', '--no-new-privs', '--pdeathsig', 'KILL', ...BOUNDS])
  })

  it('adds nothing where the tools for it are missing', () => {
    expect(cageArguments({ network: 'shared', user: null, isBounded: false }, LIMITS)).toEqual([])
  })
})
