export { addPerson, addressOf } from './people';
export { endAllSessions, endSession, principalOfSession } from './sessions';
export { signIn } from './sign-in';
export { createToken, createTokenFor, listTokens, principalOfToken, revokeToken } from './tokens';
