/** Words that people take for passwords again and again (from memory), bare and with what they add to reach twelve characters. */
const WORDS = [
  'password', 'passwort', 'motdepasse', 'letmein', 'welcome', 'qwerty', 'qwertz', 'azerty', 'qwertyuiop', 'asdfghjkl', 'zxcvbnm', 'iloveyou', 'admin', 'administrator',
  'changeme', 'secret', 'dragon', 'monkey', 'football', 'baseball', 'superman', 'batman', 'master', 'sunshine', 'princess', 'shadow', 'michael', 'trustno', 'whatever',
  'starwars', 'freedom', 'hello', 'charlie', 'computer', 'internet', 'default', 'guest', 'login', 'laboratory', 'temporary', 'testing', 'summer', 'winter', 'autumn', 'spring',
];

/** Compared both whole and with everything but letters taken out, so that `Password12345` is found too. */
export const COMMON_PASSWORDS: ReadonlySet<string> = new Set([...WORDS, ...WORDS.map((word) => word + word), ...WORDS.flatMap((word) => [`my${word}`, `the${word}`, `${word}please`, `${word}abc`])]);
