import { LockMode, type EntityManager } from '@mikro-orm/postgresql';
import { randomBytes } from 'node:crypto';
import { sha256 } from '#backend/database/trail/canonical.ts';
import { Problem } from '#backend/http/problem.ts';
import { InvitationSchema, type Invitation } from './invitation.entity.ts';

type Purpose = Invitation['purpose'];

export const invitationHours = 72;
export const resetMinutes = 60;

const lifetime: Record<Purpose, number> = {
  invitation: invitationHours * 3_600_000,
  'password-reset': resetMinutes * 60_000,
};

const pages: Record<Purpose, string> = { invitation: '/invitation', 'password-reset': '/new-password' };

/**
 * Makes a link for one person, inside an act; every older link of theirs ends (EM-03).
 * The token stands behind `#`: browsers send that part to no server, so no log and no Referer has it.
 * @returns the path to mail or to print; only the token's hash is kept
 */
export async function openLink(tx: EntityManager, personId: string, purpose: Purpose): Promise<string> {
  const now = new Date();
  for (const older of await tx.find(InvitationSchema, { personId, usedAt: null, expiresAt: { $gt: now } })) {
    older.expiresAt = now;
  }
  const token = randomBytes(32).toString('base64url');
  tx.create(InvitationSchema, {
    personId,
    purpose,
    tokenHash: sha256(token),
    expiresAt: new Date(now.getTime() + lifetime[purpose]),
  });
  return `${pages[purpose]}#${token}`;
}

/** The link of this token while it can be used; 404 for every other, whatever the cause. */
export async function usableLink(em: EntityManager, token: string, purpose: Purpose): Promise<Invitation> {
  return assertUsable(await em.findOne(InvitationSchema, { tokenHash: sha256(token), purpose }));
}

/** Uses the link up, inside the act that it allows: of two at the same instant one wins. */
export async function spendLink(tx: EntityManager, { id }: Invitation): Promise<void> {
  const locked = await tx.findOne(InvitationSchema, id, {
    lockMode: LockMode.PESSIMISTIC_WRITE,
    refresh: true,
  });
  assertUsable(locked).usedAt = new Date();
}

function assertUsable(link: Invitation | null): Invitation {
  if (link !== null && link.usedAt == null && link.expiresAt > new Date()) return link;
  throw new Problem(
    404,
    'link-not-valid',
    'This link was used, has run out, or a newer one was sent. Ask for a new one.',
  );
}
