/**
 * Passwords of eight characters and more that everyone tries first. Common practice, no source: put together from memory;
 * compared without regard to case.
 */
const COMMON = new Set(
  `12345678 123456789 1234567890 12345678910 87654321 987654321 0987654321 11111111 111111111 1111111111 22222222 33333333
  44444444 55555555 66666666 77777777 88888888 888888888 99999999 00000000 000000000 0000000000 12341234 12344321 11223344
  1122334455 112233445566 12121212 123123123 123321123 123456123 1234567a 12345678a 123456789a 1234567890a a12345678
  a123456789 aa123456 aa12345678 abc12345 abcd1234 abcdefgh abcdefghi abc123456 abcd12345 asdfghjk asdfghjkl asdf1234
  asdfasdf qwertyui qwertyuiop qwerty12 qwerty123 qwerty1234 qwerty12345 qwerty123456 1q2w3e4r 1q2w3e4r5t 1q2w3e4r5t6y
  1qaz2wsx 1qaz2wsx3edc qazwsxedc qazwsx123 zaq12wsx zaq1zaq1 zxcvbnm1 zxcvbnm123 zxcvbnmm password password1 password12
  password123 password1234 password12345 password! password1! passw0rd passw0rd1 p@ssw0rd p@ssword p@ssw0rd1 p@$$w0rd pa$$word
  pa$$w0rd passport passwort passwort1 motdepasse contraseña letmein1 letmein123 letmein! welcome1 welcome12 welcome123
  welcome! iloveyou iloveyou1 iloveyou2 iloveyou! ilovegod sunshine sunshine1 princess princess1 football football1 baseball
  baseball1 basketball superman superman1 spiderman batman123 starwars starwars1 trustno1 whatever whatever1 computer
  computer1 internet internet1 michelle jennifer jessica1 jordan23 nicholas charlie1 danielle victoria veronica
  patricia elizabeth alexander alexandra benjamin anthony1 dragon123 monkey123 master123 shadow123 hunter12 
  chocolate butterfly lovelove loveyou1 forever1 blink182 liverpool
  liverpool1 chelsea1 arsenal1 barcelona manchester changeme changeme1 change123 default1 secret12 secret123 testtest
  test1234 test12345 testing1 testing123 temp1234 admin123 admin1234 administrator adminadmin root1234 rootroot guest123
  user1234 login123 hello123 hello1234 helloworld q1w2e3r4 q1w2e3r4t5 q1w2e3r4t5y6 google123 facebook facebook1 linkedin
  access14 access123 aaaaaaaa aaaaaaaaa aaaaaaaaaa zzzzzzzz xxxxxxxx qqqqqqqq 147258369 159753123 741852963 789456123
  789456123a 963852741 147852369 159357123 31415926 314159265 20202020 19841984 summer12 summer123 winter123 spring123
  autumn123 january1 december1 november1 september october1 pokemon1 naruto123 minecraft minecraft1 fuckyou1 fuckyou2
  asshole1 killer123 matrix123 merlin123 phoenix1 thunder1 tinkerbell rainbow1 snoopy123 slipknot metallica midnight
  scorpion crystal1 sterling stephanie jonathan 1234qwer 123qweasd 123qweasdzxc qweasdzxc qwe123456 qwer1234 asd123456
  zxc123456 abc123abc evenline evenline1 evenline123`
    .split(/\s+/)
    .map((word) => word.toLowerCase()),
);

export const isCommonPassword = (password: string): boolean => COMMON.has(password.toLowerCase());
