import { spawnSync } from 'node:child_process';
import { existsSync, readFileSync } from 'node:fs';

const succeeds = (program: string, ...args: readonly string[]): boolean =>
  spawnSync(program, args, { stdio: 'ignore', timeout: 10_000 }).status === 0;

const trial = `longpatch-${process.pid}-trial`;

/** What a network namespace of this machine must be able to hold, each tried out in one. */
const kinds = [
  ['pairs of virtual Ethernet interfaces', 'add name t0 type veth peer name t1'],
  ['bridges', 'add name t2 type bridge'],
  ['VXLAN', 'add name t3 type vxlan id 1 local 192.0.2.1 remote 192.0.2.2 dstport 4789'],
] as const;

const findLack = (): string | undefined => {
  if (process.platform !== 'linux') return 'this is not Linux';
  if (process.getuid?.() !== 0) return 'network namespaces need root: run the step as root';
  if (!succeeds('ip', '-V') || !succeeds('bridge', '-V')) return "install 'iproute2'";
  if (!succeeds('python3', '-c', 'import ctypes, fcntl')) return "install 'python3'";
  if (!succeeds('ip', 'netns', 'add', trial)) return 'this system makes no network namespaces';
  try {
    const missing = kinds.filter(([, words]) => !succeeds('ip', '-n', trial, 'link', ...words.split(' ')));
    return missing.length === 0
      ? undefined
      : `this kernel has no ${missing.map(([what]) => what).join(' and no ')}`;
  } finally {
    spawnSync('ip', ['netns', 'del', trial], { stdio: 'ignore' });
  }
};

/** Why designs cannot be raised in this machine's kernel, or undefined where they can. */
export const kernelLack: string | undefined = findLack();

/** Debian's IKE daemon, which takes no argument that only asks for its version, and what speaks to it. */
export const ikeDaemon = '/usr/sbin/charon-systemd';
export const ikeControl = '/usr/sbin/swanctl';

const isConfined = (): boolean => {
  try {
    return readFileSync('/sys/kernel/security/apparmor/profiles', 'utf8').includes(`${ikeDaemon} (enforce)`);
  } catch {
    return false;
  }
};

const findIpsecLack = (): string | undefined => {
  if (kernelLack !== undefined) return kernelLack;
  if (!existsSync(ikeDaemon) || !existsSync(ikeControl))
    return "install 'charon-systemd strongswan-swanctl libcharon-extra-plugins libstrongswan-standard-plugins libstrongswan-extra-plugins'";
  if (isConfined()) return 'AppArmor keeps the IKE daemon from reading what the tests write';
  return succeeds('sh', '-c', 'exec 3<>/dev/net/tun') ? undefined : 'this system has no /dev/net/tun';
};

/** Why associations cannot be brought up on this machine, or undefined where they can. */
export const ipsecLack: string | undefined = findIpsecLack();
