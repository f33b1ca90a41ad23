/*
 * Passwords of eight characters and more that are tried first, in lower case, and shorter words that are refused when only digits or signs
 * follow them. Words of this product and its trade belong to the list as well.
 */
const lines = `
password passwort motdepasse contrasena senha wachtwoord parola losenord salasana haslo parool jelszo
passw0rd password1 password12 password123 password1234 password12345 password123456 mypassword thepassword newpassword oldpassword
yourpassword nopassword passwords passpass passpasspass password01 password11 password99 passphrase
12345678 123456789 1234567890 12345678910 123456789012 123123123 1234512345 12341234 123454321 1234554321 987654321 9876543210 87654321
11223344 1122334455 112233445566 11111111 22222222 33333333 44444444 55555555 66666666 77777777 88888888 99999999 00000000 10203040
1020304050 12121212 13131313 14141414 15151515 21212121 69696969 123321123 147258369 159357456 147852369 789456123 741852963 963852741
1q2w3e4r 1q2w3e4r5t 1q2w3e4r5t6y 1qaz2wsx 1qaz2wsx3edc 1qazxsw2 qazwsxedc qazwsxedcrfv zaq12wsx zaq1zaq1 zaq1xsw2 q1w2e3r4 q1w2e3r4t5
qweasdzxc qweasd123 qwe123qwe qwe123456 qwertyui qwertyuiop qwerty12 qwerty123 qwerty1234 qwerty12345 qwerty123456 qwerty11 qwertyqwerty
qwertz123 qwertz1234 azerty123 azerty1234 asdfghjk asdfghjkl asdfasdf asdf1234 asd123456 zxcvbnm123 zxcvbnmm zxcvzxcv zxcv1234 1234qwer
12qwaszx qwaszx12 123qweasd 123qweasdzxc qweqweqwe asdasdasd zxczxczxc 123qwe123 123abc123 abc12345 abc123456 abcd1234 abcd12345 abcdefgh
abcdefghi abcdefghij abcabcabc abcd123456 a1b2c3d4 a1b2c3d4e5 aa123456 aaa11111 a12345678 a123456789 aaaaaaaa bbbbbbbb xxxxxxxx zzzzzzzz
q12345678 z12345678 x12345678 1a2b3c4d 1a2s3d4f 123456aa 123456ab 123456qq 123456789a 123456789q 12345qwert 1234567a 1234abcd 12345abc
letmein letmein1 letmein12 letmein123 letmeinnow openopen opensesame welcome welcome1 welcome12 welcome123 welcome1234 welcomeback
iloveyou iloveyou1 iloveyou2 iloveyou12 iloveyou123 iloveyousomuch ilovegod ilovemom ilovemydog loveyou loveyou1 lovelove loveme123
lovely123 forever1 foreverlove mylove123 sweetheart sweetie1 princess princess1 princess12 princess123 prettygirl babygirl babygirl1
babygirl123 cutegirl sunshine sunshine1 sunshine12 sunshine123 moonlight starlight butterfly butterfly1 rainbow1 rainbow12 flower123
flowers1 chocolate chocolate1 strawberry blueberry pineapple watermelon cinnamon cookies1 cupcake1 icecream sugar123 honey123
football football1 football12 football123 baseball baseball1 baseball12 basketball basketball1 volleyball softball soccer12 soccer123
hockey123 liverpool liverpool1 liverpool123 manchester chelsea1 chelsea123 arsenal1 arsenal123 barcelona barcelona1 realmadrid juventus
superman superman1 superman123 spiderman spiderman1 batman123 batman12 ironman1 wolverine starwars starwars1 skywalker pokemon1 pokemon123
pikachu1 nintendo playstation minecraft minecraft1 minecraft123 fortnite counterstrike warcraft worldofwarcraft dragonball dragonfire
dragon12 dragon123 dragons1 monkey12 monkey123 monkeys1 tiger123 tigers12 elephant dolphin1 dolphins kitty123 hellokitty kitten12 puppy123
doggy123 snoopy12 scooby12 garfield mickey12 mickeymouse donaldduck bigdaddy bigboss1 godzilla gorilla1 panther1 eagle123 phoenix1
computer computer1 computer123 internet internet1 keyboard software hardware windows1 windows10 windows123 linux123 ubuntu123 debian123
macintosh microsoft samsung1 samsung123 google123 facebook facebook1 facebook123 youtube1 twitter1 instagram linkedin whatsapp yahoo123
gmail123 hotmail1 hotmail123 myspace1 myspace123 dropbox1 amazon123 netflix1 netflix123 iphone12 android1 blackberry motorola nokia123
admin123 admin1234 admin12345 admin123456 adminadmin administrator administrador root1234 rootroot toor1234 sysadmin superuser test1234
test12345 test123456 testtest testing1 testing123 testpass temp1234 temppass temporary changeme changeme1 changeme123 changeit default1
default123 guest123 guest1234 guestguest user1234 user12345 useruser demo1234 demodemo demo12345 sample123 example123 master12 master123
masterkey secret12 secret123 secret1234 secretpassword topsecret private1 login123 login1234 loginlogin access12 access123 access14
trustno1 trustnoone nothing1 whatever whatever1 whatever123 whocares idontknow idontcare dontknow hello123 hello1234 hellohello helloworld
goodbye1 fuckyou1 fuckyou2 fuckyou123 fuckoff1 pussycat badboy12 badgirl1
michael1 michael123 jennifer jennifer1 jessica1 jessica123 charlie1 charlie123 jordan23 jordan123 thomas123 andrew123 daniel123 matthew1
joshua123 anthony1 anthony123 william1 alexander alexandra nicholas jonathan christopher christian christine elizabeth stephanie samantha
samantha1 victoria victoria1 veronica caroline charlotte michelle michelle1 danielle danielle1 patricia margaret benjamin sebastian
gabriel1 gabriela fernando alejandro francisco valentina mohammed muhammad abdullah vladimir natasha1 anastasia ekaterina svetlana
summer12 summer123 summer2020 summer2021 summer2022 summer2023 summer2024 summer2025 summer2026 winter12 winter123 winter2020 winter2021
winter2022 winter2023 winter2024 winter2025 winter2026 spring123 spring2024 spring2025 spring2026 autumn123 autumn2024 autumn2025
autumn2026 january1 february march2025 october1 november december1 monday12 monday123 friday13 saturday sunday123 christmas christmas1
halloween birthday birthday1 holiday1 vacation freedom1 freedom123 liberty1 america1 american1 canada123 england1 england123 london12
london123 paris123 berlin123 newyork1 newyork123 california texas123 florida1 australia brazil123 mexico123 germany1 france123 italia123
jesus123 jesuschrist jesusislord godisgood godislove blessed1 blessing faith123 angel123 angels12 heaven12 heaven123 lucifer1 satan666
corvette mustang1 mustang123 ferrari1 ferrari123 porsche1 mercedes mercedes1 yamaha123 honda123 toyota123 chevrolet harley12 harleydavidson
metallica metallica1 nirvana1 slipknot slipknot1 linkinpark eminem123 greenday rockstar rockstar1 rockandroll guitar123 music123 musica123
midnight midnight1 shadow12 shadow123 hunter12 hunter123 killer12 killer123 ranger12 ranger123 soldier1 warrior1 warriors ninja123 samurai1
matrix12 matrix123 thunder1 lightning hurricane tornado1 blizzard avalanche snowball sunflower treehouse mountain mountains riverside
diamond1 diamonds emerald1 platinum goldfish silver12 silver123 platinum1 crystal1 jasmine1 vanessa1 tinkerbell cinderella snowwhite
maverick success1 success123 winner12 winner123 champion champion1 victory1 lucky123 lucky777 money123 moneymoney dollar12 business
business1 company1 company123 manager1 office123 student1 student123 teacher1 teacher123 school12 school123 college1 university
engineer engineer1 engineer123 engineering designer designer1 designer123 reviewer reviewer1 owner123 integrator observer1 firmware firmware1
polewright polewright1 butterworth chebyshev elliptic bilinear nyquist nyquist1 bandpass lowpass1 highpass bandstop filter123 filters1
footbridge footbridge1 vibration vibration1 accelerometer measurement measurements hydraulic pumphall spectrum frequency amplitude sampling
correcthorsebatterystaple correcthorse thisisapassword thisismypassword mypassword1 mypassword123 nevergonnagiveyouup abcdefg123 aabbccdd
aabbccddee asdfqwer asdfzxcv poiuytrewq lkjhgfdsa mnbvcxz1 mnbvcxzlkjhgfdsa plmoknijb okmnji987 qpwoeiruty 1029384756 5432154321 1357924680
2468101214 3141592654 31415926 271828182 14142135 16180339 123456123456 654321654321 102938475 192837465 918273645 password! p@ssw0rd
p@ssword p@ssw0rd1 p@ssw0rd123 pa$$word pa$$w0rd passw0rd1 passw0rd123 passw0rd! pass1234 pass12345 pass123456 pass@123 pass@1234 admin@123
summer winter spring autumn qwerty qwertz azerty dragon monkey admin hello secret master shadow killer hunter ranger soccer hockey tiger
login access guest user demo test temp root pass money lucky angel jesus flower purple orange yellow silver golden cookie ginger pepper
banana coffee cheese chicken london berlin paris january march april august october friday monday sunday school student teacher company
office manager batman superman pokemon mustang ferrari yamaha matrix google apple iphone samsung filter pump seat bridge
`

export const commonPasswords: ReadonlySet<string> = new Set(lines.split(/\s+/).filter(Boolean))
