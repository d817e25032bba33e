export { changePerson, disablePerson, enablePerson, endSessions } from './change';
export { inviteAgain, inviteFromCommandLine, invitePerson } from './invite';
export { getPerson, listPeople } from './read';
export { NewPerson, PersonChange, PersonDisable, PersonQuery, PersonView } from './schemas';
