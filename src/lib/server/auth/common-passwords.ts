/**
 * Passwords that people choose again and again, eight characters and longer, in lower case. Written
 * down from memory of the lists that are often published; no file was copied. A password is also
 * refused when it is one of these with digits or signs around it (see password-rules.ts).
 */
const LIST = `
password password1 password12 password123 password1234 password12345 passw0rd p4ssword
passwort passwords mypassword newpassword yourpassword thepassword password1! adminpassword
userpassword temppassword testpassword changeme changeme1 changeme123 changethis letmein1
letmein12 letmein123 letmeinnow welcome1 welcome12 welcome123 welcome1234 welcomehome
welcomeback iloveyou iloveyou1 iloveyou2 iloveyou123 iloveyouforever iloveyousomuch
ilovemyself ilovegod iloveme1 ihateyou lovelove loveyou1 lovely123 loveme123 forever1
forever21 sunshine sunshine1 sunshine123 princess princess1 princess123 football football1
football123 baseball baseball1 basketball basketball1 softball volleyball soccer123
hockey123 superman superman1 superman123 batman123 spiderman spiderman1 ironman1 starwars
starwars1 startrek pokemon1 pokemon123 minecraft minecraft1 fortnite roblox123 nintendo
playstation xbox3600 callofduty counterstrike warcraft starcraft leagueoflegends michael1
michael123 michelle michelle1 jennifer jennifer1 jessica1 jessica123 jonathan jonathan1
jordan23 joshua123 matthew1 nicholas nicole123 patricia patrick1 rebecca1 richard1 robert123
samantha samantha1 samsung1 samsung123 stephanie victoria victoria1 william1 elizabeth
elizabeth1 christian christina christopher alexander alexander1 alexandra andrew123 anthony1
anthony123 ashley123 benjamin benjamin1 brandon1 brittany caroline catherine charles1
charlie1 charlie123 charlotte danielle danielle1 dennis123 dominic1 elizabeth123 francesca
gabriel1 gabriela gabriella isabella isabelle katherine kimberly kristina lawrence madison1
margaret marie123 marlboro melissa1 mercedes natalie1 nathaniel october1 november december
december1 september september1 summer123 summer2019 summer2020 summer2021 summer2022
summer2023 summer2024 summer2025 winter123 winter2019 winter2020 winter2021 winter2022
winter2023 winter2024 spring2020 spring2021 spring2022 spring2023 spring2024 autumn2020
autumn2021 autumn2022 autumn2023 monday123 tuesday1 wednesday thursday friday123 saturday
sunday123 january1 february australia barcelona california colorado england1 germany1
hollywood liverpool liverpool1 manchester arsenal1 arsenal123 chelsea1 chelsea123 newcastle
scotland london123 newyork1 newyork123 paris123 portland brooklyn chicago1 florida1 virginia
access14 administrator admin123 admin1234 admin12345 administrator1 adminadmin rootroot
root1234 toor1234 superuser sysadmin username user1234 guest123 guestguest test1234
test12345 testtest testing1 testing123 temporary temp1234 default1 default123 computer
computer1 computer123 internet internet1 internet123 network1 server123 windows1 windows10
windows7 microsoft microsoft1 linux123 ubuntu123 google123 facebook facebook1 facebook123
twitter1 instagram youtube1 linkedin1 myspace1 hotmail1 yahoo123 asdfasdf asdfghjk asdfghjkl
asdf1234 asdfqwer qwertyui qwertyuiop qwerty12 qwerty123 qwerty1234 qwerty12345 qwerty123456
qwertyqwerty qwer1234 qwerasdf qweasdzxc qazwsxed qazwsxedc qazwsx123 1qaz2wsx 1qaz2wsx3edc
1qazxsw2 1q2w3e4r 1q2w3e4r5t 1q2w3e4r5t6y q1w2e3r4 q1w2e3r4t5 zxcvbnm1 zxcvbnm123 zxcvbnma
zaq12wsx zaq1xsw2 azertyui azertyuiop qwertzui qwertzuiop poiuytrewq lkjhgfdsa mnbvcxza
abcdefgh abcdefghi abcdefghijkl abcd1234 abcde12345 abc12345 abc123456 abc123abc abcabcabc
aaaaaaaa a1b2c3d4 a1b2c3d4e5 a12345678 a123456789 aa123456 aa12345678 q1234567 12345678
123456789 1234567890 12345678910 123456789012 123456780 123456123456 123123123 123321123
1234512345 12341234 123412341234 11111111 111111111 1111111111 00000000 000000000000
22222222 55555555 66666666 77777777 88888888 99999999 12121212 121212121212 11223344
1122334455 112233445566 12344321 123454321 87654321 987654321 9876543210 098765432
0987654321 0123456789 147258369 159357456 159753456 147852369 741852963 789456123 456789123
31415926 3141592653 27182818 trustno1 trustme1 whatever whatever1 whateverme nothing1
secret123 secret12 secretsecret topsecret mysecret supersecret letmeinplease opensesame
abracadabra blahblah blablabla hello123 hello1234 hellohello helloworld hello12345 goodbye1
goodmorning goodnight dragon12 dragon123 dragon1234 monkey12 monkey123 monkey1234 tigger12
tiger123 shadow12 shadow123 master12 master123 mustang1 corvette porsche1 ferrari1
ferrari123 mercedes1 bmw12345 toyota123 yamaha123 harley123 harleydavidson motorola nokia123
iphone123 android1 chocolate chocolate1 cookie123 cupcake1 butterfly butterfly1 butterfly123
flower123 flowers1 rainbow1 rainbow123 snowball snowflake starlight moonlight midnight
midnight1 blackcat whitecat kittycat kitty123 pussycat doggy123 puppy123 elephant dolphin1
dolphins penguin1 panther1 panthers cowboys1 steelers yankees1 lakers24 redsox123 eagles123
rangers1 warriors champion champions jesus123 jesuschrist jesusislord jesussaves godisgood
godislove blessed1 heavenly angel123 angels123 faith123 hallelujah freedom1 freedom123
liberty1 america1 american1 patriots patriot1 veteran1 military army1234 navy1234 marines1
soldier1 fuckyou1 fuckyou123 fuckyou2 fuckoff1 asshole1 bullshit bitch123 biteme123
killer123 killyou1 hacker123 hackedyou nopassword babygirl babygirl1 babygirl123 babyboy1
sweetheart sweetie1 honey123 darling1 handsome beautiful beautiful1 gorgeous sexy1234
family123 familia1 mother123 father123 mommy123 daddy123 brother1 sisters1 grandma1 children
birthday birthday1 anniversary matrix123 neo12345 maverick gandalf1 hogwarts harrypotter
voldemort hermione lordoftherings frodo123 skywalker darthvader metallica metallica1
nirvana1 slipknot slipknot1 greenday blink182 linkinpark beatles1 rolling1 guitar123
guitarra drummer1 music123 musica123 musician pianist1 piano123 pianoforte violin123
trumpet1 clarinet saxophone orchestra symphony mozart123 beethoven beethoven1 chopin123
tuning123 tuningfork pianotuner pianotuning unison123 harmony1 harmonics
temperament ebbtone1 ebbtone123 ebbtoneebbtone correcthorsebatterystaple correcthorse
batterystaple thisismypassword thisisapassword passwordispassword iforgotmypassword
forgotpassword rememberme dontforget nevermind mypassword1 mypassword123 notapassword
itsasecret keepitsecret bonjour1 motdepasse motdepasse1 soleil123 doudou123 chouchou
loulou123 azerty123 azerty1234 schatz123 hallo123 hallo1234 geheim123 passwort1 passwort123
willkommen ficken123 schalke04 contrasena contrasena1 teamo123 teamomucho tequiero estrella
realmadrid barcelona1 juventus1 forzainter francesco andrea123 benvenuto ciaociao senha123
senha1234 brasil123 flamengo corinthians wachtwoord welkom01 welkom123 lösenord losenord1
salasana salasana1 haslo123 haslo1234 polska123 password2020 password2021 password2022
password2023 password2024 password2025 pa55word pa55word1 p@ssw0rd p@ssw0rd1 p@ssword
p@ssword1 passw0rd1 passw0rd123
`;

export const COMMON_PASSWORDS: ReadonlySet<string> = new Set(LIST.trim().split(/\s+/));
