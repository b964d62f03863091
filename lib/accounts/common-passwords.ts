/** Words that people reach for first, in lower case. Our own list, from common knowledge; it grows as needed. */
export const COMMON_PASSWORD_WORDS: readonly string[] = (
  "password passwort passwords passcode passphrase pass letmein welcome hello goodbye login logon signin admin " +
  "administrator root user guest test testing tester default changeme change temp temporary secret private access " +
  "enter open sesame qwerty qwertz azerty abc xyz iloveyou loveyou love lover lovely forever baby angel honey " +
  "sweetheart darling princess prince queen king master dragon monkey tiger lion eagle falcon shadow killer hunter " +
  "ranger soldier warrior ninja pirate wizard magic football baseball basketball hockey soccer golf tennis rugby " +
  "sunshine summer winter spring autumn flower rainbow butterfly cookie cheese chocolate banana orange pepper ginger " +
  "computer internet keyboard laptop mobile phone office windows system server network security freedom whatever " +
  "nothing trustno trustme money dollar business company work music guitar piano drummer singer composer song songs " +
  "january february march april may june july august september october november december monday tuesday wednesday " +
  "thursday friday saturday sunday michael jennifer thomas daniel jessica ashley charlie andrew george robert " +
  "matthew hannah anna maria joshua jordan nicole michelle david james john william richard joseph martin peter " +
  "london paris berlin england scotland france germany canada europe silver golden diamond crystal super superman " +
  "hero number one two three four five six seven eight nine first last mother father family friend friends star " +
  "stars moon heaven please correct horse battery staple thisis mypassword mine yours"
).split(" ");
