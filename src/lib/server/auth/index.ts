export { addPerson, addressOf } from './people';
export { endSession, principalOfSession } from './sessions';
export { isStillIn } from './still-in';
export { signIn } from './sign-in';
export { createToken, createTokenFor, listTokens, principalOfToken, revokeToken } from './tokens';
