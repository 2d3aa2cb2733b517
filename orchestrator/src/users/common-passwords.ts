/** Passwords of eight characters and more that guessers try first; lower case. From memory. */
export const commonPasswords: ReadonlySet<string> = new Set(
  `
  12341234 12345678 123456789 1234567890 0123456789 123123123 1234qwer 12qwaszx 1q2w3e4r 1q2w3e4r5t
  1qaz2wsx 1qazxsw2 11223344 147258369 87654321 987654321 9876543210 a1b2c3d4 abc12345 abcd1234 abcdefgh
  access14 admin123 admin1234 administrator asdf1234 asdfasdf asdfghjk asdfghjkl baseball basketball
  changeme changeme1 changeme123 computer cresthold default1 football iloveyou letmein1 letmein123
  liverpool login123 monkey123 p@ssw0rd p@ssword pa$$word pa55word passw0rd password password! password1
  password12 password123 password1234 princess q1w2e3r4 q1w2e3r4t5 qazwsxedc qwer1234 qwerasdf qwerqwer
  qwerty12 qwerty123 qwertyui qwertyuiop root1234 secret123 starwars sunshine superman temp1234 test1234
  testtest trustno1 welcome1 welcome123 whatever zaq12wsx zxcvbnm1 zxcvbnm123
  `
    .split(/\s+/)
    .filter((word) => word !== ''),
);
