/** Something only the holder of the key can read. */
export interface Sealed {
  nonce: Uint8Array<ArrayBuffer>;
  bytes: ArrayBuffer;
}

/** The person's device key from the session (base64, 32 bytes), usable but not readable by scripts. */
export function importDeviceKey(base64: string): Promise<CryptoKey> {
  const raw = Uint8Array.from(atob(base64), (character) => character.charCodeAt(0));
  return crypto.subtle.importKey('raw', raw, 'AES-GCM', false, ['encrypt', 'decrypt']);
}

export async function sealed(content: unknown, key: CryptoKey): Promise<Sealed> {
  const nonce = crypto.getRandomValues(new Uint8Array(12));
  const text = new TextEncoder().encode(JSON.stringify(content));
  return { nonce, bytes: await crypto.subtle.encrypt({ name: 'AES-GCM', iv: nonce }, key, text) };
}

export async function unsealed<T>({ nonce, bytes }: Sealed, key: CryptoKey): Promise<T> {
  const text = await crypto.subtle.decrypt({ name: 'AES-GCM', iv: nonce }, key, bytes);
  return JSON.parse(new TextDecoder().decode(text)) as T;
}
