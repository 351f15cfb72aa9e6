import { BlockList, isIP, isIPv6 } from 'node:net';

/**
 * Blocks of IPv4 that are no public unicast: the special-purpose registry of IANA (RFC 6890 and its updates), with
 * multicast and the reserved remainder. 192.0.0.0/24, 192.31.196.0/24, 192.52.193.0/24 and 192.175.48.0/24 are partly
 * reachable and lead to infrastructure alone.
 */
const CLOSED_IPV4 = [
  '0.0.0.0/8',
  '10.0.0.0/8',
  '100.64.0.0/10',
  '127.0.0.0/8',
  '169.254.0.0/16',
  '172.16.0.0/12',
  '192.0.0.0/24',
  '192.0.2.0/24',
  '192.31.196.0/24',
  '192.52.193.0/24',
  '192.88.99.0/24',
  '192.168.0.0/16',
  '192.175.48.0/24',
  '198.18.0.0/15',
  '198.51.100.0/24',
  '203.0.113.0/24',
  '224.0.0.0/4',
  '240.0.0.0/4',
];

/** Of IPv6 the global unicast block alone is open (RFC 4291), without what is special in it (RFC 6890). */
const OPEN_IPV6 = '2000::/3';
const CLOSED_IPV6 = ['2001::/23', '2001:db8::/32', '2002::/16', '2620:4f:8000::/48', '3fff::/20'];

/** A block of addresses in CIDR notation; null where it is none. */
function blockOf(text: string): { address: string; bits: number; family: 'ipv4' | 'ipv6' } | null {
  const [address, bits, ...rest] = text.split('/');
  const version = isIP(address);
  if (version === 0 || rest.length > 0 || !/^\d{1,3}$/.test(bits ?? '')) return null;
  if (Number(bits) > (version === 4 ? 32 : 128)) return null;
  return { address, bits: Number(bits), family: version === 4 ? 'ipv4' : 'ipv6' };
}

function listOf(blocks: readonly string[]): BlockList {
  const list = new BlockList();
  for (const text of blocks) {
    const block = blockOf(text);
    if (!block) throw new Error(`${text} is no block of addresses.`);
    list.addSubnet(block.address, block.bits, block.family);
  }
  return list;
}

const closed4 = listOf(CLOSED_IPV4);
const open6 = listOf([OPEN_IPV6]);
const closed6 = listOf(CLOSED_IPV6);

/** Whether an address is one that the whole internet can reach. Addresses that wrap another one are not. */
export function isPublic(address: string): boolean {
  if (isIPv6(address)) return open6.check(address, 'ipv6') && !closed6.check(address, 'ipv6');
  return isIP(address) === 4 && !closed4.check(address, 'ipv4');
}

/** Where messages may go. */
export interface Reach {
  /** Without encryption, too. */
  http: boolean;
  allows(address: string): boolean;
}

/**
 * @param networks blocks that are reached beside the public addresses
 * @throws Error where one of them is no block in CIDR notation
 */
export function reach({ http, networks }: { http: boolean; networks: readonly string[] }): Reach {
  const further4 = listOf(networks.filter((block) => !block.includes(':')));
  const further6 = listOf(networks.filter((block) => block.includes(':')));
  const isFurther = (address: string) => {
    const version = isIP(address);
    // A list of IPv4 blocks would take ::ffff:10.0.0.1 for 10.0.0.1.
    return version === 4 ? further4.check(address, 'ipv4') : version === 6 && further6.check(address, 'ipv6');
  };
  return { http, allows: (address) => isPublic(address) || isFurther(address) };
}
