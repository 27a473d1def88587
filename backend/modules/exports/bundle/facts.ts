/** What a bundle says of its origin, in the manifest and the readme alike. Hashes are SHA-256 in hexadecimal. */
export interface BundleFacts {
  exportNumber: number;
  method: string;
  reportHash: string;
  cut: { number: number; sha256: string };
  chainHead: { sequence: number; hash: string };
  run: { number: number; planHash: string; resultSha256: string; engineVersion: string; seed: number };
  productVersion: string;
}
