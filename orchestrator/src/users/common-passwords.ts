/**
 * Passwords that guessers try first, lower case; source and licence in common-passwords.NOTICE.md.
 */
export const commonPasswords: ReadonlySet<string> = new Set(
  `
  0.0.0.000 0.0.000 000000 000001 000007 000111 007007 01011 01011910 01011970 01011975 01011977 01011980 01011981
  01011982 01011983 01011984 01011985 01011986 01011987 01011988 01011989 01011990 01011991 01011992 01011993 01011999
  01012000 01012001 01012010 01012011 010203 01020304 01091989 0123456789 02011985 02011986 02011987 02021983 02021984
  02021985 02021986 02021987 02021988 02021989 02031984 02031986 02031987 02041982 02041983 02041984 02041986 02051983
  02051986 02061985 02061986 02061989 02071982 02071986 02081984 02081987 02081988 02081989 02091986 02091987 02101985
  03082006 100000 10101 10203 102030 10203040 102938 1029384756 111111 11111111 111111a 11112222 111222 111222333
  111333 112211 11221122 11223 112233 11223344 1122334455 112358 11235813 1123581321 12011987 120676 12121 121314
  12131415 122333 12301230 123098 12312 123123 12312312 123123123 123123a 123123q 1232323q 12332 123321 123321123
  123321a 123321q 12341234 1234321 12344321 12345 123451 123454321 123455 1234554321 123456 123456654321 1234567
  12345678 123456789 1234567890 1234567890a 1234567890q 1234567891 12345678910 123456789a 123456789q 123456789z
  12345678a 12345678q 12345679 1234567a 1234567q 123456a 123456aa 123456k 123456q 123456qw 123456qwerty 123456r
  123456s 123456z 123457 12345a 12345q 12345qwe 12345qwert 12345t 12345z 1234abcd 1234qwe 1234qwer 123654 123654789
  1236987 12369874 123698745 123789 123789456 123987 123aaa 123abc 123asd 123qaz 123qq123 123qwe 123qwe123 123qweasd
  123qweasdzxc 123qwerty 123zxc 124578 128500 12qw12 12qw34er 12qwas 12qwaszx 131313 132435 13243546 134679 135246
  135790 135792468 1357924680 1366613 141627 142536 147258 14725836 147258369 147369 147852 147852369 1478963 14789632
  147896325 147963 150781 15426378 159357 159632 15975 159753 159951 162534 18436572 192837 192837465 19411945 1a2b3c
  1a2b3c4d 1passwor 1q2w3e 1q2w3e4r 1q2w3e4r5 1q2w3e4r5t 1q2w3e4r5t6y 1qa2ws3ed 1qaz2ws 1qaz2wsx 1qaz2wsx3edc 1qazxsw2
  1qwerty 1x2zkg8w 200000 21031988 21122112 2128506 222333 223344 235689 246810 25802580 258456 314159 31415926 315475
  321123 321456 321654 321654987 332211 333666 336699 362436 369963 420247 445566 456123 456321 456654 456852
  4815162342 4runner 50cent 50spanks 51505150 5551212 555666 555777 654123 666666 666777 666999 6751520 696969
  73501505 741852 741852963 753159 753951 7753191 7777777 777888 7779311 778899 784512 787898 789123 789456 78945612
  789456123 7895123 789654 789987 794613 7ugd5hip2j 852456 8675309 87654321 8j4ye3uz 90210 906090 911911 9293709b13
  9379992 951753 9562876 963852 963852741 987456 987456321 987654321 9876543210 a11111 a12345 a123456 a1234567
  a12345678 a123456789 a1b2c3 a1b2c3d4 a1s2d3 a1s2d3f4 aa123456 aaa111 aaliyah aardvark aaron aaron1 abc12 abc123
  abc1234 abc12345 abcd123 abcd1234 abcdefgh aberdeen abgrtyu abigail abraham absolut absolute access access14 accord
  account achilles action active adam12 adams adgjmptw adidas admin admin123 admin1234 administrator admiral adonis
  adrian adriana adrienne adult adults aezakmi africa again agent007 aggies aikido airborne airbus airforce airplane
  akira alabama alaska albatros albert alberto albina albion alejandr alejandro aleksandr aleksandra aleksey alenka
  alex123 alexalex alexande alexander alexandr alexandra alexey alexia alexis alfred alibaba alice alicia alien aliens
  alina alisha alison allan allen alliance allison allmine allsop allstar alpha alpha1 alphabet alpine alucard always
  alyssa amadeus amanda amanda1 amateur amateurs amazing amazon amber amber1 amelia america america1 american amigo
  amsterda amsterdam anaconda anakin anarchy anastasia anders anderson andre andrea andreas andrei andres andrew
  andrew1 andrey andromed andromeda anfield angel angel1 angela angelica angelina angelo angels angie angus anhyeuem
  animal animals anime anita annabell annette annie annie1 annika answer anthony anthony1 antoine anton antoni antonio
  anubis anything apache apollo apollo13 apple apple1 apple123 applepie apples april aquarius aragorn arcadia archer
  archie area51 argentina ariana arizona arjay arlene armagedon armani arnold arsenal arsenal1 artem artemis artemka
  arthur artist artur arturo asd123 asdasd asdf123 asdf1234 asdfasdf asdfg asdfgh asdfghj asdfghjk asdfghjkl asdfjkl
  asdfzxcv asdzxc ashlee ashleigh ashley ashley1 ashton asian aspire aspirine assass assassin assman assword asterix
  astrid astro astros athena athens athlon atlanta atlantic atlantis atomic attack attitude aubrey auburn audia4
  audrey august augusta augustus aurora aussie austin austin1 australi australia autumn avalanch avalon avatar avenger
  awesome azamat azerty azsxdc azsxdcfv babes babies babybaby babyblue babyboy babydoll babyface babygirl babylon
  babylon5 babylove bacardi bacchus backdoor backup bacon badass badboy baddog badger badgirl badman baggins baggio
  bagira bailey bailey1 balance baller balloon balloons balls bambam bamboo banana bananas banane bandit bangbang
  bangkok banker banner banshee banzai barbados barbara barber barbie barcelon barcelona barefoot barker barkley
  barnes barney baron barrett barry barsik bartman barton baseball baseball1 basket basketba basketball bassman batman
  batman1 battle baxter bayern bcfields beach beaches beagle beamer beaner beanie beans bearbear bearcat bears beast
  beast1 beastie beatle beatles beatrice beautifu beautiful beauty beaver beavis because becker beckham becky beefcake
  beemer beerbeer beetle believe belinda bella bella1 belle belly bender benfica bengals benjamin bennett benny benson
  bentley beowulf beretta berger berlin bermuda bernard bernie bertha bertie bethany better betty beverly bhbirf
  bianca bicycle bigass bigballs bigbear bigbird bigblue bigboy bigdaddy bigdog bigfoot bigger biggie biggles bigguy
  bigmac bigman bigmike bigmoney bigone bigred bigtime bigtit bikini bilbo billie billy billy1 billybob billyboy
  bimmer bingo bingo1 binladen birdie birdman birthday biscuit bishop biteme bizkit blabla black black1 blackbir
  blackcat blackdog blackhaw blackie blackjac blackjack blackman blackout blacks blacky blade blades blahblah blake
  blaster blaze blazer blessed blessing blink182 blizzard blonde blondes blondie blood bloody blossom blue123 blue22
  bluebird blueblue blueboy bluedog blueeyes bluefish bluemoon blues bluesky bob123 bobafett bobbie bobbob bobby
  bobby1 bobcat bobdylan boeing bogart bogdan bogey bohica bollocks bollox bomber bond007 bondage bonehead bones
  bonita bonjour bonjovi bonkers bonnie bonsai booger boogie booker bookworm boomboom boomer bootie boots booty
  boricua boris borussia bosco bossman boston bottle bottom bounce bowler bowling bowser boxing boxster br0d3r br549
  bradford bradley brandi brando brandon brandon1 brandy brasil braves bravo brazil breast breasts breeze brenda
  brendan brent brett brewer brewster brian brian1 briana brianna bridge bridget bright brighton brigitte bristol
  britney brittany brittney broadway broken bronco broncos brooke brooklyn brooks brother brothers brown brownie
  browning browns bruce brucelee bruins bruno brutus bryan bryant bubba bubba1 bubbas bubble bubbles bucket buckeye
  buckeyes buckshot budapest buddah buddha buddie buddy buddy1 buddyboy budlight budman budweise buffalo buffett buffy
  buffy1 bugger builder bulldog bulldog1 bulldogs bullet bullfrog bulls bullseye bunghole bunny bunny1 burger burton
  business busted buster buster1 butch butler buzzard byteme cabbage cactus cadillac caesar caitlin calgary calico
  caliente californ california caligula callaway callie calvin camaro cambiami camel camelot camels cameltoe camera
  cameron cameron1 camilla camille campbell camper canada canadian cancel cancer cancun candice candle candy candyman
  cannabis cannon canon cantona canyon capital capone caprice capslock captain caramel caravan carbon cardinal cards
  carina carla carlito carlitos carlo carlos carlton carmel carmen carol carole carolin carolina caroline carolyn
  carpedie carpet carrera carrie carrot carson carter cartman cartoon casanova caserta casey casey1 casino casper
  cassidy cassie castle castro cat123 catalina catch22 catdog catfish catherin catherine cathy catman cattle cavalier
  caveman cbr600 ccbill cdtnkfyf cecilia cedric celeron celeste celica celine celtic celtics center central century
  cerberus cessna cfitymrf cgfhnfr chainsaw chair champ champion champs chance chandler chanel chang change changed
  changeme changeme1 changeme123 chaos charger chargers charity charlene charles charles1 charley charli charlie
  charlie1 charlott charlotte charlton charly charmed chase chaser cheater check checkers cheech cheeks cheers cheese
  cheese1 cheetah chelsea chelsea1 chemical cheng cherokee cherry cheryl chester chester1 chevelle chevrole chevrolet
  chevy chevy1 chewie cheyenne chicago chicago1 chichi chicken chicken1 chickens chicks chico chief chiefs children
  chimera china chinook chipper chippy chivas chloe chloe1 chocolat chocolate chong chopin chopper chris chris1
  chrisbln chrissy christ christia christian christie christin christina christine christmas christop christopher
  christy chrome chronic chrono chrysler chuai chuang chubby chuck chuckie chuckles chucky chunky church ciccio cicero
  cigars cinder cindy cinema cinnamon circle circus citizen cjkysirj cjkywt claire clancy clapton clarence clarinet
  clark classic claude claudi claudia claudio claymore clayton clemson clevelan clifford clinton clipper clitoris
  cloud cloud9 clouds clover clown cobalt cobra cobra1 cocacola cocaine coconut coffee cohiba coldbeer coleman colleen
  college collin collins colombia colonel colorado colors colt45 colton coltrane columbia columbus combat comet comics
  command commando common company compaq compute computer concrete condom condor confused connect conner connie connor
  conrad consumer contact content control cookie cookies cooldude cooler coolguy coolio coolman coolness cooper cooter
  copper corleone cornell corona corrado corsair corvette cosmic cosmo cosmos cosworth cotton cougar cougars counter
  country county courage courtney cowboy cowboy1 cowboys cowboys1 coyote crack cracker craig crash crawford crazy
  crazy1 crazybab cream creampie creamy creative creature credit cresthold cricket criminal crimson cristian cristina
  critter crjhgbjy cruise cruiser crunch crusader crysis crystal crystal1 cthulhu cthutq cubbies cubswin cuddles
  cupcake curious curtis custom cutlass cutter cxfcnmt cyber cyclone cyclops cygnus cynthia cypress daddy daddy1
  daemon daewoo dagger daisy daisy1 dakota dalejr dallas dallas1 dalton damage damian damien dammit damnit dance
  dancer danger danie daniel daniel1 daniela danielle daniil danila danni danny danny1 dannyboy dante danzig daphne
  darius darkman darkness darkside darkstar darling darrell darren darwin david david1 davide davids davidson davis
  dawson daytona dbrnjh dbrnjhbz deacon deadhead deadman deadpool deanna death death1 debbie deborah december deedee
  deejay deepthroat deeznuts deeznutz default1 defender defiant deftones delete delphi delta delta1 deluxe demon
  demons denali denis denise deniska dennis denver depeche derek derrick desert design designer desire desiree deskjet
  destiny destroy detroit deutsch devil devil666 devildog devils dexter dfcbkbq dfkthbz dfkthf dfktynbyf dfvgbh dharma
  diablo dialog diamond diamond1 diamonds diana dianne diego diehard diesel dietcoke dieter digger diggler digital
  digital1 dilbert dilligaf dillon dinamo dingdong dinosaur direct director dirtbike dirty discover disney diver
  divine divorce dixie dkflbckfd dkflbvbh doberman doctor dodge dodge1 dodger dodgeram dodgers dog123 dogfood doggie
  doggy doghouse dogman doitnow dollar dollars dolores dolphin dolphin1 dolphins domain dominic domino donald donkey
  donna donnie donuts doobie doodle doogie dookie dorian dorothy dotcom double doughboy douglas downtown dracula drago
  dragon dragon1 dragon12 dragonba dragonball dragons dragoon drake dream dreamer dreams driver drizzt droopy drowssap
  drpepper drummer drunk dthjybrf dublin ducati duchess dudley dumbass duncan durango duster dustin dusty dutch
  dutchess dwayne dwight dylan dynasty eagle eagle1 eagles eagles1 eastside eastwood eatme ebony eclipse eddie eddie1
  edgar eduard eduardo edward edward1 edwards eeyore eileen einstein ekaterina elaine eldorado eleanor electra
  electric electron element elena elephant eleven elijah elite elizabet elizabeth elizaveta elliot elliott elvira
  elvis elvis1 elwood emerald emerson emily emily1 eminem emmanuel emmitt empire energy engage engine engineer england
  english enigma enjoy enter enter1 enterpri enterprise entropy eraser erica ericsson ernest escape escort esther
  estrella eternal eternity eugene eureka europa europe evelyn everest everett everton excalibu exigen exigent exodus
  explorer express extreme fabian fabie fabric facial faith falcon falcons fallen fallout family famous fantasy farley
  farmer farscape farside fashion fastball faster fatass fatboy fatcat father fatima fatman feather february federico
  felicia felipe felix fender fergie fernand fernando ferrari ferrari1 ferret ferris fester fetish fghtkm fgtkmcby
  ficken fiesta figaro fight fighter filter filthy finance finger fingers finish fireball firebird firefly firefox
  fireman first fisher fishes fishing fishing1 fisting fitness fktrcfylh fktrcfylhf fktrctq flames flamingo flash
  flash1 flatron fletch fletcher flexible flight flipper floppy florence florian florida florida1 flounder flower
  flowers floyd fluffy flyboy flyers flying focus foobar footbal football football1 fordf150 forest forever forfun
  forget forgot formula formula1 forrest fortuna fortune forum forward foryou fossil foster fountain fowler foxtrot
  france frances francesc francis franco francois frank frank1 frankie franklin franky fraser freak freaks freaky
  freckles freddie freddy frederic fredfred freedom freedom1 freeman freepass freeuser freeway freeze french fresh
  friday friend friendly friends fright frisco frisky fritz frodo frogger froggy front242 frontier frosty frozen fubar
  fugazi fulham function funny funtime fusion futbol future fuzzy fyfcnfcbz fylhtq fytxrf fyutkbyf gabrie gabriel
  gabriel1 gabriela gabriell gadget galaxy galina galore gambit gamecube gameover games gandalf gandalf1 gangbang
  gangsta gangster garage garbage garcia garden garfield gargoyle garrett gaston gateway gateway1 gator gator1
  gatorade gators gawker gbpltw gegcbr geheim gemini general generic genesis geneva genius geoffrey george george1
  georgia gerald gerard german germany geronimo gesperrt getmoney getsome gfhjkm gfhjkm1 gfhjkm123 gfhjkmgfhjkm ghbdtn
  ghbdtnbr ghblehjr ghetto ghjcnj ghjcnjnfr ghost ghostrider giant giants gibson gilbert gillian ginger ginger1 giorgi
  giovanni girls giuseppe gizmo gizmo1 gizmodo gjkbyf gladiator global gloria glory gmoney gn56gn56 goalie goaway
  goblin goblue gobucks goddess godfathe godfather godsmack godzilla gofish goforit goldberg golden goldfish goldie
  goldstar goldwing golfball golfer golfer1 golfgolf golfing goliath gollum gonavy gonzo goober goodboy goodbye
  goodluck goodman goodtime goofy google gooner goose gopher gordon gordon24 gorilla gotcha gothic gotohell govols
  grace gracie graham grandma granny grant graphics grateful grease great great1 greatone greece green green1 greenbay
  greenday greene greens gregor gregory gremlin grendel gretchen gretzky griffey griffin gringo grizzly gromit groove
  groovy groucho grover grumpy gsxr750 guardian guest guiness guinness guitar guitar1 gundam gunnar gunner gunners
  gunther gustav hacked hacker hailey hairy hal9000 halflife halifax hallo hambone hamburg hamilton hamish hamlet
  hammer hammers hampton hamster handsome handyman hanna hannah hannibal hansen hansolo happy happy1 happy123 happyday
  hardcore harder hardon hardrock hardware harley harley1 harmony harold harper harris harrison harry harry1 harvard
  harvey hassan hastings havefun hawaii hawaiian hawkeye hawkeyes hayabusa hayden hayley health heart hearts heater
  heather heather1 heaven heckfy hector hedgehog heidi heineken helen helena helene hellfire hello hello1 hello123
  helloo hellos hellyeah helmet helpme hendrix henry hentai herbert herbie hercules heritage herman hermes hershey
  hesoyam heynow hidden higgins highland hillary hilton hiphop hippie history hithere hitman hjvfirf hobbes hobbit
  hockey hockey1 hokies holden holiday holland hollow holly holly1 hollywoo hollywood holmes homeboy homer homer1
  homerj homers homerun honda honda1 hondas honey honey1 hongkong hooper hoosier hoosiers hooter hooters hootie hoover
  hopeful hopeless hopper horizon horndog hornet horney horse horses hotbox hotboy hotdog hotred hotrod hotshot
  hotstuff hottie house house1 houses houston hover howard huang hubert hudson hummer hungry hunter hunter1 hunting
  hurley hurrican husker huskers huskies hustler hyperion iamgod ib6ub9 ibanez iceberg icecream iceman idiot idontkno
  idontknow iforgot iguana ihateyou illini illinois illusion iloveu iloveyo iloveyou imagine immortal impala imperial
  incubus india indian indiana indians indigo infantry inferno infiniti infinity ingrid insane insert inside insomnia
  integra intel internet intrepid intruder inuyasha iomega ipswich ireland irina irish irish1 ironman isabel isabella
  isabelle isaiah iscool island israel istanbul italia italian ivanov ivanova iverson iwantu jabroni jackal jackass
  jackie jackoff jackpot jackson jackson1 jackson5 jacob jacob1 jacques jagger jaguar jamaica james james007 james1
  jamesbon jamesbond jameson jamie jamie1 jammer jammin janet janice janine january japan japanese jarhead jasmin
  jasmine jasmine1 jason jason1 jasper javier jaybird jayden jayhawk jayhawks jayson jazzman jeanette jeanne jeffery
  jeffrey jelly jenkins jenna jennie jennifer jenny jenny1 jensen jeremiah jeremy jericho jerkoff jerome jerry jersey
  jesse jessic jessica jessica1 jessie jester jesus jesus1 jethro jetski jewels jiang jillian jimbo jimbob jimmie
  jimmy jimmy1 jiong jktymrf joanna joanne jockey joejoe johann johanna johannes john316 johnboy johnjohn johnny
  johnson joker joker1 jokers jonathan jones jones1 jorda jordan jordan1 jordan23 joseph joshua joshua1 journey jrcfyf
  judith juggalo juice julia julian julie juliet juliette julius jumper junebug jungle junior jupiter just4fun just4me
  justdoit justice justin justin1 justine justme juventus kahuna kaiser kaitlyn kakashka kaktus kamikaze kangaroo
  kansas karate karen karina karma karolina kashmir kasper katana katerina katherin katherine kathleen kathryn kathy
  katie katie1 katrin katrina kawasaki kayla kaylee kcj9wx5n keegan keeper keith keller kelley kelly kelly1 kelsey
  kendall kendra kennedy kenneth kenny kenshin kentucky kenwood kenworth kermit kevin kevin1 keyboard keystone keywest
  kickass kicker killbill killer killer1 killers killme kilroy kimber kimberly kinder kingdom kingfish kingkong
  kingpin kingston kinky kipper kirill kirsten kisses kissing kissme kissmyass kitkat kitten kitty kitty1 kittycat
  kittykat klaster kleopatra klingon knickers knicks knight knights knockers knopka kodiak kolobok koshka kosmos
  kostya kotaku kotenok kramer krishna krista kristen kristi kristin kristina kristine kristy krystal ktyjxrf kungfu
  labrador labtec lacrosse ladies ladybug laguna lakers lakota lambert lamont lance lancelot lancer lansing laptop
  larisa larry laser lassie lasvegas latin latinas latino laura laurel lauren laurence laurent laurie lawrence lawyer
  leader leanne leather leavemealone ledzep legacy legend legion legolas lemon lemons lennon leonard leonardo leonid
  leopard lesbian lesbians lesley leslie lespaul lestat lester letmein letmein1 letmein123 letmein2 letsgo letter
  lewis lexmark lexus liang liberty library lickit lickme lifehack lifetime light lighter lightnin lightning lights
  lillian lilly lincoln linda linda1 lindsay lindsey lineage2 lionel lionking lions lipstick liquid lisalisa little
  liverpoo liverpool lizard lizzie loaded lobster logan logan1 login123 logitech lokomotiv lol123 lolipop lolita
  lollipop lollol london lonely lonestar lonewolf longhorn looker looking looney looser lorenzo lorraine loser losers
  lotus louis louise loulou love1 love12 love123 love69 loveit lovelove lovely loveme lover lover1 loverboy lovers
  loveyou loving lowrider ltybcrf lucas lucifer lucille lucky lucky1 lucky13 lucky7 luckydog ludmila ludwig luther
  lvbnhbq macdaddy machine macross madden maddie maddog madeline madina madison madison1 madman madmax madness madonna
  madrid maestro maggie maggie1 maggot magic magic1 magical magick magicman magnolia magnum magnus magpie maiden
  mailcreated5240 mailman majestic makaveli maksim malaka malcolm malibu malina mallard malone mamapapa manager
  manchest manchester mancity mandarin mandingo mandy mango maniac manning manowar manson mantis manuel manuela manutd
  maradona marathon marcel march marcia marco marcos marcus margaret margarita maria maria1 mariah marian marianne
  marie marika marilyn marin marina marine marine1 mariners marines marino marino13 mario marion marisa marissa marius
  marker market markus marlboro marlene marley marlin marsha marshall martha martin martin1 martina martine martinez
  martini marvel marvin maryann maryjane maryland mason massage massimo massive maste master master1 masters matador
  mathew matilda matrix matteo matthew matthew1 matthews mattie mature maureen maurice maverick max123 maxell maxim
  maxima maximum maximus maxine maxmax maxwell mayday mayhem maynard mazafaka mazda mclaren meatball meathead meatloaf
  mechanic media medical medicine medusa megadeth megaman megan megapass megatron meghan meister melanie melinda
  melissa melissa1 mellon mellow melody melvin member memorex memory memphis menace meowmeow mephisto mercedes mercury
  meredith meridian merlin merlot mermaid mersedes metal metallic metallica method mexico miami michae michael
  michael1 michaela micheal michel michele michell michelle michigan mickey mickey1 microlab micron microphone
  microsof microsoft midget midnight midway mighty miguel mikemike mikey mikey1 milana milano milena miles military
  milkman miller millie million millions millwall milton minecraft minime minnie miracle mirage miranda miriam mirror
  misery misfit misha mishka mission missouri missy missy1 mister mistress misty misty1 mitch mitchell mittens mobile
  models modena mohamed mohammed mollie molly molly1 mollydog moloko molson mommy momoney monaco monalisa monarch
  monday mondeo money money1 moneyman moneys mongoose monica monika monique monitor monke monkey monkey1 monkey12
  monkey123 monkeys monopoly monroe monster monster1 montana monte montgom240 montreal monty moocow mookie moomoo
  moonlight moose moose1 morgan morgan1 moritz morning morpheus morris morrison mortgage mortimer moscow mother
  motherlode motley motorola mountain mouse mouse1 movie movies mozart muffin mulder mullet multiplelo munchkin muppet
  murder murphy murray musashi muscle mushroom music music1 musica musicman mustafa mustang mustang1 mustangs mustard
  mybaby mylife mylove myname mypass myself mystery mystic nadine nancy napass napoleon napoli napster naruto nascar
  nasty nasty1 nastya natali natalia natalie natasha nathalie nathan national natural nature naughty ncc1701 ncc1701a
  ncc1701d ncc1701e ne1469 nebraska nellie nelson nemesis neptune netscape network nevada newbie newcastl newlife
  newman newpass newpass6 newport newton newyork newyork1 nfnmzyf nguyen nicholas nickel nicol nicola nicolas nicole
  nicole1 night nightmare nikita nikitos nikki nikola nikolay nimbus nimrod niners ninja ninja1 ninjas nintendo nipper
  nipple nipples nirvana nissan nitram nobody noelle nofear nokia nokia6300 nolimit nomore noodle noodles nookie
  nopass norman northern norton norway nothing novell november ntktajy nudist nugget nuggets number number1
  nuttertools nwo4life nyjets nylons nymets oakland oakley oasis obelix obiwan oblivion ocean oceans october odessa
  office ohyeah oicu812 oilers oklahoma oksana oldman oliver oliver1 olivia olivier omega omega1 onelove onetime
  online onlyme openup operator optimus oracle orange orange1 oranges orchid oregon original orioles orion orion1
  orlando oscar oscar1 osiris othello ou812 ou8122 outkast outlaw overkill overlord oxford p0015123 p@ssw0rd p@ssword
  pa$$word pa55w0rd pa55word pablo pacers pacific packard packer packers packers1 pacman padres paint paintbal
  paintball painter pakistan palace paladin palmer paloma pamela panama panasoni panasonic pancho panda pandora
  pantera panther panther1 panthers panties pants pantyhos panzer paper paradise paradox paranoid paris parker parola
  parrot party pascal pass123 pass1234 passat passion passme passpass passport passw0rd passwd passwor passwor1
  password password! password1 password12 password123 password1234 password2 passwords passwort pasword patches
  patience patricia patrick patrick1 patriot patriots patton patty paula pauline pavilion pavlov payton pdtplf peace
  peach peaches peanut peanuts pearl pearljam pebbles pedro peekaboo peewee pegasus pencil penelope penguin penguins
  penny penny1 penthous pentium people pepper pepper1 pepsi pepsi1 perfect persik person personal pervert peter peter1
  peterpan peters peterson petra petrov peugeot peyton phantom pheonix philip philippe philips phillies phillip
  phillips philly phish phoebe phoeni phoenix phoenix1 phone photo photos phpbb piano pianoman picard picasso piccolo
  pickle pickles pickup picture pierce pierre piglet pikachu pillow pilot pineappl pingpong pinhead pinkfloy pinkfloyd
  pinky pioneer piper pippen pippin piramida pirate pirates pisces pissing pissoff pistol pitbull pizza pizzas planet
  plasma plastic platinum playboy playboy1 player playing playstation playtime please pleasure plumber plymouth pobeda
  poetry poison pokemon pokemon1 poker poland polaris police polina polly polniypizdec0211 polska pompey poncho
  pontiac poochie poodle poohbear pookie poontang pooper poopie poopoo pooppoop pooter popcorn popeye poppy porkchop
  porsche porsche1 porsche9 porter portland portugal poseidon positive possum postal potato pothead potter powder
  powell power power1 powers preacher precious predator prelude premier presario presto preston pretty primus prince
  princes princess printer prissy private privet prodigy profit promise property prophet proxy psycho public puddin
  pudding pulsar pumpkin punisher punkin punkrock puppies puppy pupsik purdue purple pussey pussie pussies putter
  pyramid python q12345 q123456 q1w2e3 q1w2e3r4 q1w2e3r4t5 q1w2e3r4t5y6 q2w3e4r5 qawsed qawsedrf qaz123 qazqaz qazwsx
  qazwsx1 qazwsx12 qazwsx123 qazwsxed qazwsxedc qazwsxedcrfv qazxsw qazxswedc qazzaq qiang qiong qqq111 quality
  quantum quartz quattro queen queens quest quincy qwaszx qwe123 qweasd qweasd123 qweasdzxc qweqwe qwer123 qwer1234
  qwerasdf qwerqwer qwert qwert1 qwert123 qwerty qwerty1 qwerty12 qwerty123 qwerty1234 qwerty12345 qwerty123456
  qwertyu qwertyui qwertyuio qwertyuiop r2d2c3po rabbit rabota racecar racer racerx rachael rachel rachel1 racing
  radio rafael ragnarok raider raiders raiders1 railroad rainbow rainbow6 rainman raistlin ralph rambler rambo
  rammstein ramona ramones ramses rancid randall random randy ranger ranger1 rangers rangers1 raptor raquel rascal
  rasdzv3 rasputin rasta rastaman raven raven1 ravens raymond rbhbkk rctybz reader reading ready reagan reality really
  realmadrid reaper rebecca rebecca1 rebel rebel1 rebels records recovery red123 redalert redbird redbull reddog
  redfish redhead redhot redline redman redneck redrum redskins redsox redwing redwings redwood reebok reefer reggie
  regina register remember remote renata renault renee renegade rereirf rescue research resident respect retard
  retired revenge review reynolds rfhbyf rfnthbyf rfrfirf rfrnec rhbcnbyf rhfcjnrf rhiannon rhino rhonda rhtdtlrj
  ricardo richard richard1 richards richie richmond ricky rider rightnow riley ripken ripley ripper ripple river
  rivers rjirfrgbde rjntyjr rjycnfynby roadkill roadking roadrunn robbie robert robert1 roberta roberto roberts robin
  robinson robotech rocker rocket rockets rockford rockhard rockon rocks rockstar rocky rocky1 rodman rodney roger
  rogers roland roller rolling rolltide roman romance romashka romeo romero rommel ronald ronaldo ronnie rookie rooney
  rooster root1234 rootbeer roscoe rosebud rosemary rosie rotten route66 rover rovers roxanne royal royals rtyuehe
  rubber rufus rugby rules rulez rulezzz runescape runner running rupert rush2112 ruslan russell russia russian rustam
  rusty rusty1 sabbath sabina sabine sabres sabrina sacred sadie sadie1 safari safety sahara sailboat sailing sailor
  saint saints sakura salamander salasana saleen sally sally1 salmon salomon salsero salvador samantha samara samiam
  sammie sammy sammy1 sampson samson samsung samsung1 samtron samuel samurai sanchez sancho sander sanders sandiego
  sandman sandra sandro sandwich sandy sandy1 sanfran santana santiago santos sapper sapphire sarah sarah1 saratoga
  sascha sasha sasha1 sassy sasuke satan satan666 satana saturday saturn sauron sausage savage savannah sayang scania
  scanner scarface scarlet scarlett school science scooby scoobydo scooter scooter1 scorpio scorpio1 scorpion scotch
  scotland scott scott1 scottie scotty scout scrappy scratch scream screen scruffy scuba scully seahawks seamus searay
  search seattle sebastia sebastian second secret secret1 secret123 secrets secure security seeker seinfeld select
  selena seminole semperfi senior sentinel septembe september serega serena serenity sergeant sergei sergey sergi
  sergio sersolution server service sesame seven seven7 shado shadow shadow1 shadows shaggy shalom shaman shamrock
  shane shaney14 shang shanghai shania shannon shannon1 shaolin shark sharks sharky sharon shasta shaved shawn shazam
  shearer sheba sheena sheila shelby shell shelley shelly shemale shepherd sheriff sherlock sherman sherri sherry
  sherwood shiloh shiner shirley shogun shooter shopping short shorty shotgun showme showtime shuang shutup sidney
  siemens sierra silence silent silly silver silver1 silverad silvia simba simon simon1 simona simone simple simpson
  simpsons sinatra sinbad sinclair singer single sinister sinner sirius sister sithlord sixers skate skater skeeter
  skidoo skiing skinny skipper skippy skittles skorpion skydive skylar skyler skyline skywalke skywalker slacker
  slapper slappy slapshot slave slave1 slayer sleepy slick slider slinky slipknot slippery small smashing smeghead
  smegma smelly smile smiles smiley smith smiths smitty smoke smoker smokes smokey smokie smokin smoking smooth smudge
  snake snake1 snakes snapon snapper snapple snatch sneakers snickers sniper snooker snoop snoopdog snoopy snowball
  snowboar snowman snuffy snuggles sobaka soccer soccer1 socrates softball software sojdlg123aljg soldier soleil
  solnce solomon solution somethin something sommer sonic sonics sonny sonoma sooner sooners sophi sophia sophie
  soso123aljg soulmate sound southern southpar southpark space spaceman spanish spank spanking spankme spanky sparkle
  sparks sparky sparky1 sparrow sparta spartak spartan spartans spawn speaker spears special specialk spectre spectrum
  speed speedo speedy spencer spencer1 spice spider spider1 spiderma spiderman spidey spike spike1 spinner spirit
  spitfire splash splinter sponge spongebob spooky sport sporting sports spread spring springer sprint sprite spunky
  spurs spurs1 sputnik spyder squall squash squirrel squirt srinivas stacey stacy stalin stalker stallion standard
  stanford stanley staples star69 starbuck starcraf starcraft stardust starfire starfish stargate starman stars
  starship start starter startrek starwars static station stealth steam steel steele steeler steelers stefan stefano
  stella steph stephani stephanie stephen stereo sterlin sterling steve steve1 steven stevens stevie stewart stick
  sticks sticky stimpy sting stinger stingray stinky stocking stocks stolen stone stonecol stonecold stoned stoner
  stones stoney stories storm stormy strange stranger street strength stretch strider strike striker strip stripper
  stroke stroker strong stuart student studio studly stuff stumpy stunner stupid subaru sublime submit subway subzero
  success sugar sullivan sultan summer summer1 summit sundance sunday sunflowe sunflower sunny sunnyday sunrise sunset
  sunshin sunshine super super1 super123 superfly superman superman1 supersta superstar support supreme surfer surfing
  susan susana susanne suzanne suzuki sveta svetik svetlana svoboda swallow sweden sweet sweet1 sweetie sweetpea
  sweets sweety swimmer swimming swinger swingers sword swordfis swordfish swords sydney sylvia syncmaster syracuse
  system syzygy tabitha tacobell tacoma talisman talon tamara tammy tango tanker tanner tanya tardis target tarheel
  tarheels tarzan tasha tatiana tattoo tatyana taurus taylor taylor1 tazman tazmania tdutybq tdutybz teacher technics
  techno teddy teddy1 teddybea teddybear teens tekken telefon temp123 temp1234 tempest templar temple tennis tequila
  teresa terminal terminator terrapin terror terry test1 test123 test1234 tester testing testpass testtest texas
  texas1 thailand thanatos thanks thankyou theater theboss thecat thedog thedoors thedude theend thegame thegreat
  thekid theking theman theodore theone theresa therock thesims thing thirteen thoma thomas thomas1 thompson thongs
  three throat thuglife thumbs thumper thunder thunder1 thunderb thursday thx1138 tiberius tiburon ticket tickle
  tiffany tiffany1 tiger tiger1 tigers tigger tigger1 tight tights timber timmy timothy tinker tinkerbell tinman
  tintin titanic titanium titans titleist titten titties titty tobias today together toledo tolkien tomato tomcat
  tommy tommy1 tommyboy tomorrow tomtom tongue toolman tootsie topcat topdog topgun topher topper tornado toronto
  torres toshiba tottenha tottenham toyota tracey tracker tractor tracy trader traffic train trainer trains trance
  transam translator trapper travel traveler travis treasure trebor trevor trfnthbyf trial triangle tricia tricky
  trident trigger trinidad trinity trisha tristan triton triumph trixie trojan trojans trombone trooper trouble trout
  truck trucker trucks truelove truman trumpet trunks trustno1 tsunami tucker tuesday tulips tunafish tundra turbo
  turbo1 turkey turkey50 turner turtle tweety twenty twilight twinkle twins twisted twister tyler tyler1 typhoon
  tyrone tyson ufkbyf ultima ultimate umbrella underdog undertaker unicorn unique united universal universe unknown
  unreal usa123 usarmy usnavy utopia vacation vader vadim valencia valentin valentina valera valeri valeria valerie
  valhalla valkyrie valley vampire vampires vanessa vanhalen vanilla vasilisa vector vectra vedder vegas vegeta velvet
  venera venice ventura venus verbatim veritas vermont vernon verona veronica veronika vertigo vette vfczyz vfhbyf
  vfhecz vfhufhbnf vfksirf vfrcbv vfrcbvrf vfvekz vfvfgfgf vfvjxrf vh5150 viagra victor victoria victory video vietnam
  viewsonic viking vikings viktor viktoria village vincent vinnie violet violetta viper viper1 vipers virgin virginia
  virtual vision vitalik vivian vkontakte vladik vladimir vladislav volley volume volvo voodoo vortex voyager voyeur
  vulcan wagner walker wallace walleye wally walmart walnut walrus walter wapbbs warcraft wareagle warhammer warlock
  warlord warner warning warren warrior warriors warthog washington wasser wassup watcher water waterloo waters watson
  wayne weasel weather weaver webmaste webmaster webster wedding weezer welcome welcome1 welcome123 welder wendy
  werewolf werner wesley western westham westside westwood whatever whatsup wheels whiskers whiskey whisky whisper
  white whitesox whitey whitney whocares whynot wibble wicked wilbur wildcat wildcats wildfire wildman willia william
  william1 williams willie willis willow willy wilson window windows windsor wings winner winnie winston winston1
  winter wisdom wishbone wizard wolf359 wolfgang wolfie wolfman wolfpack wolverin wolverine wolves woman wombat women
  wonder woody woody1 woofwoof woohoo wookie wordpass working world wraith wrangler wrestle wrestlin wrestling wright
  wrinkle1 writer wutang xanadu xander xavier xbox360 xerxes xfiles xiang xiong xtreme xyz123 yamaha yankee yankees
  yankees1 ybrbnf ybrjkfq yeahbaby yellow yfcntymrf yfnfif yfnfkmz yolanda yomama yosemite young yourmom yummy yvonne
  yzerman z1x2c3 z1x2c3v4 zachary zaphod zappa zaq123 zaq12wsx zaq1xsw2 zaqwsx zaqxsw zaraza zenith zeppelin zerocool
  zheng zhong zhuai zhuang zidane ziggy zigzag zipper zippy zombie zorro zvezda zxasqw12 zxc123 zxcasd zxcasdqwe
  zxcv1234 zxcvbn zxcvbnm zxcvbnm1 zxcvbnm123
  `
    .split(/\s+/)
    .filter((word) => word !== ''),
);
