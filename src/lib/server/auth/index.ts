export { askForReset, changeMe, changePassword, MeChange, MeView, PasswordChange, readMe } from './account';
export { holderOfLink, makeLink, setPasswordByLink, voidAllLinks, type LinkKind } from './links';
export { addPerson, addressOf, clientOfRole, insertPerson } from './people';
export { endOwnSessions, endSession, endSessionsOf, listSessions, principalOfSession } from './sessions';
export { isStillIn } from './still-in';
export { signIn } from './sign-in';
export { createToken, createTokenFor, listTokens, principalOfToken, revokeToken } from './tokens';
