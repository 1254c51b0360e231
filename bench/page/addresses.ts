import { networkInterfaces, type NetworkInterfaceInfo } from "node:os";

type Interfaces = NodeJS.Dict<NetworkInterfaceInfo[]>;

/** IPv4 addresses by which other devices reach this machine; those of private networks first, which a phone at home is in. */
export function networkAddresses(interfaces: Interfaces = networkInterfaces()): string[] {
  const outer = Object.values(interfaces)
    .flatMap((list) => list ?? [])
    .filter(({ internal, family }) => !internal && family === "IPv4")
    .map(({ address }) => address);
  const linkLocal = (address: string): boolean => address.startsWith("169.254.");
  return [...new Set(outer)].sort((a, b) => rank(a) - rank(b)).filter((address, _, all) => !linkLocal(address) || all.every(linkLocal));
}

/**
 * Home networks before larger ones before public addresses.
 *
 * Source    RFC 1918, §3 (private address space)
 */
function rank(address: string): number {
  if (address.startsWith("192.168.")) return 0;
  if (address.startsWith("10.")) return 1;
  return /^172\.(1[6-9]|2\d|3[01])\./.test(address) ? 2 : 3;
}
