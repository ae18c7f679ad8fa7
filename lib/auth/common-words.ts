/**
 * Pieces that the commonest passwords are made of, and whole phrases among them; from memory, as they recur in every
 * published list of leaked passwords. Rows of keys, alphabets, digits and repetitions are rules in password-rules.ts.
 */
export const COMMON_WORDS: readonly string[] = `
  password passwort passw0rd passwd pass word motdepasse contrasena senha parola wachtwoord haslo kennwort geheim secret
  letmein welcome willkommen bienvenue hello admin administrator root user guest test testing login master access default
  changeme change please temporary temp nothing iloveyou ilove love you loveyou lovely forever always baby babygirl honey
  sunshine princess dragon monkey football baseball basketball hockey soccer superman batman starwars pokemon michael
  jennifer jessica ashley daniel andrew thomas charlie jordan hunter ranger shadow killer trustno mustang harley cookie
  cheese chocolate banana orange flower summer winter spring autumn january february march april june july august
  september october november december monday tuesday wednesday thursday friday saturday sunday freedom whatever
  computer internet samsung google facebook microsoft windows apple qwerty qwertz azerty asdf zxcv qazwsx abc 123 iam the
  mypassword thisismypassword thisisapassword thisismy thisis this is my new old your our secure security safe
  photo photos photograph photography photographer picture pictures camera image images stackyard stack yard
  correcthorsebatterystaple thequickbrownfox jumpsoverthelazydog tobeornottobe thatisthequestion maytheforcebewithyou
  opensesame abracadabra supercalifragilisticexpialidocious rumpelstiltskin loremipsum dolorsitamet onceuponatime
`
  .trim()
  .split(/\s+/);
