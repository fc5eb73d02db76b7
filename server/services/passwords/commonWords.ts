/** Words and runs that people build passwords from. A password that is one of these with digits around it is refused. */
export const commonWords = new Set(
  `password passwort passwords passphrase passwordpassword mypassword secret secretsecret topsecret letmein letmeinletmein
  welcome welcomeback welcomehome administrator administration administrador admin adminadmin root rootroot superuser
  sysadmin systemadmin default changeme changemenow changeit pleasechangeme temporary temppassword testtest testing
  testpassword testaccount guest guestguest login loginlogin signin username userpassword qwerty qwertyuiop
  qwertyuiopasdfghjkl qwertyuiopasdf asdfghjkl asdfghjklzxcvbnm zxcvbnm qwertyqwerty qazwsx qazwsxedc qazwsxedcrfv
  qweasdzxc qweasd onetwothreefour abcdefgh abcdefghij abcdefghijkl abcdefghijklm abcdefghijklmnop iloveyou
  iloveyouforever iloveyousomuch iloveu ilovemyself ilovemyfamily lovelove princess princessprincess sunshine
  sunshinesunshine football footballfootball baseball basketball superman supermansuperman batman batmanbatman
  spiderman dragon dragondragon monkey monkeymonkey master mastermaster shadow michael jordan harley hunter
  ranger buster soccer hockey killer george charlie andrew thomas robert jennifer jessica michelle daniel matthew
  starwars starwarsstarwars computer computercomputer internet internetinternet internetexplorer microsoft windows
  freedom freedomfreedom whatever whateverwhatever trustno trustnoone trustnobody mustang corvette ferrari mercedes
  chocolate strawberry butterfly butterflybutterfly cheese banana pepper ginger cookie summer winter spring autumn
  summertime wintertime monday tuesday wednesday thursday friday saturday sunday january february march april june july
  august september october november december blessed jesuschrist jesusjesus godisgood godbless liverpool arsenal
  chelsea manchester manchesterunited barcelona realmadrid juventus correcthorsebatterystaple correcthorse
  batterystaple harbour harbor harbourmaster harbormaster portauthority portoffice harbouroffice lifeguard lifeguards
  lighthouse breakwater dutyofficer dutyoperator operator operatoroperator pilotage pilotstation marina seaside
  beachsafety beachpatrol wavewatch wavesensor offing offingoffing marrowick marrowickmarrowick coastguard
  openopenopen enterenter letmeinplease opensesame nopassword nopasswords mypasswordis thisismypassword
  notapassword password1password company companyname welcomewelcome hellohello helloworld hellohellohello goodmorning
  goodnight donotenter keepout forgotpassword forgetful unknown unknownunknown nothing nothingnothing something`
    .split(/\s+/)
    .filter(Boolean),
)
