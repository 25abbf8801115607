/**
 * What is tried first: whole passwords and the words that they are built from, in lower case. Gathered by hand, from
 * memory of what published lists of leaked passwords have in common.
 */
export const commonPasswords: ReadonlySet<string> = new Set(
  `
!qaz2wsx#edc, 0987654321, 100200300400, 102030405060, 1029384756, 110110110110, 1111aaaa2222,
112233445566, 112358132134, 121212121212, 123123123123, 123321123321, 123456654321, 1234567890qwerty,
123456789qwerty, 123456qwerty, 12345qwert, 1234qwer1234, 1234qwerasdf, 123qweasd, 123qweasdzxc,
141421356237, 147258369, 147258369147, 159753, 159753456852, 161803398874, 1q2w3e4r, 1q2w3e4r5t,
1qaz2wsx, 1qaz2wsx3edc, 1qaz@wsx3edc, 1qazxsw23edc, 271828182845, 314159265358, 741852963, 789456123,
789456123000, 987654321987, 999888777666, a1b2c3d4, aaaabbbbcccc, abc123, abcd1234abcd, abcdefgh,
abcdefghijkl, access, admin, adminadmin, administrator, administrator1, alexander, arsenal, asdf1234,
asdf1234asdf, asdfasdfasdf, asdfghjkl, asdfghjkl123, autumn, azerty, barcelona, baseball, baseball1234,
basketball, batman, business, butterfly, changeme, changemenow, changethispassword, charlie, chelsea,
chocolate, christopher, company, company1234, computer, computer1234, contrasena,
correct horse battery staple, correcthorse, correcthorsebatterystaple, default, demo, demodemo,
demopassword, donald, dragon, dragonball, dragonballz, dragondragon, elizabeth, enterprise, facebook,
fcbarcelona, football, football1234, freedom, fuckyou, fuckyoufuckyou, google, guest, harrypotter,
hello, hellohello, helloworld, helloworld123, hunter, idontknow, ihateyou, ilovejesus, iloveyou,
iloveyou1234, iloveyou12345, iloveyouforever, iloveyouiloveyou, internet, internet1234, jennifer,
jesus1234567, jesuschrist, jordan, killer, laboratory, labpassword, letmein, letmeinletmein, letmeinnow,
letmeinplease, linkedin, liverpool, liverpoolfc, login, loveyouforever, manchester, manchesterunited,
master, michael, michael12345, microsoft, monkey, monkeymonkey, motdepasse, mypassword, mypassword123,
naruto, newpassword, newpassword123, nopassword, nopassword123, nothing, office, office1234,
oldpassword, opensesame, p@ssw0rd, p@ssword, pa55word, pass word pass word 123, pass1234pass,
passphrase, passphrase123, passw0rd, password, password!password, password1234, password12345,
password123456, password_password, passwordpassword, passwords, passwort, physics, pleasechangeme,
pokemon, princess, princess1234, q1w2e3r4t5y6, q2w3e4r5t6y7, qazwsxedc, qweasdzxc, qweasdzxc123,
qwer1234qwer, qwerasdfzxcv, qwerty, qwerty123456, qwertyqwerty, qwertyuiop, qwertyuiop123,
qwertyuiop1234567890, qwertyuiop[], qwertyuiopasdf, qwertzuiop, realmadrid, root, rootpassword,
rootroot, samsung, samsung12345, science, secret, secretpassword, security, security1234, shadow,
somethingelse, spongebob, spongebobsquarepants, spring, startrek, startrek1701, starwars, stephanie,
strawberry, summer, sunshine, sunshine1234, superman, superman1234, supersecret, supersecretpassword,
superuser, sysadmin, sysadministrator, systemadmin, temporary, temporarypassword, temppassword, test,
testing, testpassword, testtest, testuser, thisisapassword, thisismypassword, toor, topsecret, trustno1,
trustnoone, twitter, unbelievable, university, user, username, usernamepassword, wachtwoord, welcome,
welcome12345, welcome123456, whatever, whateverwhatever, whiskey, windows, winter, xsw2zaq1cde3,
zaq12wsx, zaq1xsw2cde3, zaq1zaq1zaq1, zxcvbnm, zxcvbnm123456
`
    .split(',')
    .map((entry) => entry.trim()),
);
