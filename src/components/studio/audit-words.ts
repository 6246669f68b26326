/** The audit log's codes as words. An unknown code is shown as it is: it is better read than hidden. */
const WORDS: Record<string, string> = {
  'account.registered': 'made an account',
  'password.changed': 'changed the password',
  'session.started': 'signed in',
  'session.ended': 'signed out',
  'session.refused': 'typed a wrong password',
  'session.ended-from-list': 'ended a session',
  'session.others-ended': 'ended every other session',
  'studio.made': 'made the studio',
  'studio.deleted': 'deleted the studio',
  'role.changed': 'changed the role of',
  'member.left': 'left the studio',
  'member.removed': 'removed',
  'member.joined': 'joined the studio',
  'invitation.made': 'made an invitation',
  'invitation.withdrawn': 'withdrew an invitation',
  'invitation.accepted': 'accepted an invitation',
};
const DONE: Record<string, string> = { deleted: 'deleted', restored: 'brought back', purged: 'removed for good', shared: 'shared' };

export function auditWords(action: string): string {
  if (WORDS[action]) return WORDS[action];
  const [noun, verb] = action.split('.');
  return verb && DONE[verb] ? `${DONE[verb]} the ${noun.replace(/-/g, ' ')}` : action;
}

/** `from helper to maker`, where there is more to say. */
export function auditDetails(details: Record<string, unknown>): string {
  if (typeof details.from === 'string' && typeof details.to === 'string') return `from ${details.from} to ${details.to}`;
  return typeof details.role === 'string' ? `as ${details.role}` : '';
}
