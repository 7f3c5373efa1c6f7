/**
 * The address that a request came from, for limits.
 *
 * The server appends the peer's address to `x-forwarded-for`, and so does each proxy before it; so the client stands
 * `PROXY_HOPS` places before the last one. What a client wrote there itself is further left and never counts.
 */
export function clientAddress(request: Request, proxyHops = Number(process.env.PROXY_HOPS ?? "0")): string {
  const chain = (request.headers.get("x-forwarded-for") ?? "").split(",").map((part) => part.trim());
  const address = chain.at(-1 - proxyHops) ?? chain[0] ?? "";
  return address === "" ? "unknown" : network(address);
}

/** An IPv6 client usually owns a whole /64, so that is what is counted. */
function network(address: string): string {
  const plain = address.replace(/^::ffff:(?=\d+\.)/, "");
  if (!plain.includes(":")) return plain;
  const [head = "", tail] = plain.split("::");
  const left = head.split(":").filter((group) => group !== "");
  const right = (tail ?? "").split(":").filter((group) => group !== "");
  const zeros =
    tail === undefined ? [] : Array.from({ length: Math.max(0, 8 - left.length - right.length) }, () => "0");
  return `${[...left, ...zeros, ...right].slice(0, 4).join(":")}::/64`;
}
