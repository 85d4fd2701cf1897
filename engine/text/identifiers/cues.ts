/**
 * Words around a name that say what it is the name of. Written for this project from practice; no
 * published source. All lower case.
 */
export interface Cues {
  /** In front of a person's name: "Mrs", "Auntie", "Herr". */
  readonly titles: ReadonlySet<string>;
  /** What somebody is to somebody: "my sister Ruth", "Ruth's mother". */
  readonly relations: ReadonlySet<string>;
  /** "a man called Ruth", "namens Ruth". */
  readonly naming: ReadonlySet<string>;
  /** What people do and things do not. */
  readonly doing: ReadonlySet<string>;
  /** In front of a place. */
  readonly placeBefore: ReadonlySet<string>;
  /** Inside the name of a place. */
  readonly placeWords: ReadonlySet<string>;
  /** Inside the name of an organisation. */
  readonly organisationWords: ReadonlySet<string>;
  /** Things that have names: boats, animals, houses. */
  readonly named: ReadonlySet<string>;
  /** Definite articles. */
  readonly articles: ReadonlySet<string>;
  /** In front of a person: "with Ruth", "and Ruth". */
  readonly personBefore: ReadonlySet<string>;
  /** Written with a capital without being anybody's name. */
  readonly capitalised: ReadonlySet<string>;
  /** In front of a noun: what follows is no name by itself. */
  readonly determiners: ReadonlySet<string>;
  /** In front of a month: "in May". */
  readonly monthBefore: ReadonlySet<string>;
}

const set = (words: string): ReadonlySet<string> =>
  new Set(words.split(/\s+/u).filter((word) => word !== ''));

const particles = set(
  'van von der den de du del della di da dos das la le el al ap ab bin ben ibn abu mac mc o y zu zum zur ten ter',
);

/** What may stand between the parts of one name ("Anna von der Aa"). */
export function isParticle(word: string): boolean {
  return particles.has(word);
}

/** Months that are names of people as well. */
export const monthNames = set('may june april august avril mai juni augustus abril augusto');

const english: Cues = {
  titles: set(
    `mr mrs ms miss mx mister missus dr doctor prof professor rev reverend father sister nurse matron
     captain skipper cap'n capt sir lady lord dame pc constable sergeant sgt inspector councillor cllr
     aunt auntie aunty uncle granny grandma grandpa grandad granda nana nan gran cousin midwife
     judge coach pastor vicar minister bishop canon madam lieutenant major colonel provost brother`,
  ),
  relations: set(
    `mother mum mam mom mummy mammy father dad daddy brother sister son daughter husband wife partner
     boyfriend girlfriend fiance fiancé fiancée friend mate pal neighbour neighbor cousin niece nephew
     aunt auntie aunty uncle granny grandma grandmother gran nan nana grandad grandpa grandfather granda
     boss manager supervisor colleague workmate teacher headteacher midwife nurse doctor gp physio
     carer counsellor therapist landlord landlady minister priest vicar lawyer solicitor accountant
     baby boy girl wee lad lass lassie bairn child kid grandson granddaughter stepdad stepmum
     stepfather stepmother stepson stepdaughter godmother godfather twin sibling ex widow widower
     skipper crewman crewmate deckhand apprentice student pupil client patient lodger flatmate
     roommate housemate classmate fellow man woman guy chap cleaner driver postman shopkeeper
     plumber builder joiner electrician farmer crofter fisherman vet dentist chemist pharmacist
     man's woman's mum's dad's in-law mother-in-law father-in-law sister-in-law brother-in-law
     daughter-in-law son-in-law`,
  ),
  naming: set(`called named name's nickname nicknamed christened surname`),
  doing: set(
    `said says told tells asked asks thought thinks knew knows wanted wants went goes came comes was is
     has had would could will did does does'nt doesn't didn't wasn't isn't hasn't wouldn't couldn't
     gave gives took takes made makes got gets rang phoned rings called texted lived lives died moved
     married helped helps worked works left stayed brought looked laughed cried smiled used kept
     started stopped felt feels loved loves liked likes hated drove walked sat stood ran found
     never always just still even only also who whose whom passed fell broke met meets taught
     explained replied answered shouted whispered agreed offered promised visited picked showed
     bought sold paid needed tried believes believed remembers remembered reckons reckoned cooked
     sent wrote and`,
  ),
  placeBefore: set(
    `in at near around outside towards toward into onto across over between beyond via through
     throughout off round behind opposite`,
  ),
  placeWords: set(
    `street road lane avenue close square bay harbour harbor island islands isle isles point head hill
     hills loch lake lough river bridge beach park village town county ness sound strand pier quay
     crescent terrace drive court way row place gardens green common valley glen moor forest wood
     woods mount mountain port fort cape coast shire north south east west upper lower great little
     cove creek falls firth burn field fields gate wharf landing peninsula district city heights
     junction cottage cottages house farm voe wick haven reef rock rocks skerry stack lighthouse
     mill brae vale springs ferry castle`,
  ),
  organisationWords: set(
    `school academy college university hospital surgery clinic council church chapel kirk cathedral
     centre center trust ltd limited inc plc llc llp company co sons brothers association society club mission
     hotel inn arms café cafe stores store shop bank police ferries lines group board committee housing
     foundation fisheries nursery nursing hospice practice pharmacy bakery bakers garage motors
     shipping airlines airways services service agency department ministry museum theatre library
     institute federation union league cooperative co-operative partnership homes insurance
     solicitors builders engineering seafoods salmon marine charity project forum network
     university's brewery distillery supermarket radio times herald gazette news newspaper`,
  ),
  named: set(
    `boat ferry ship vessel trawler yacht dinghy launch tug lifeboat steamer dog cat horse pony cow ewe
     pub bar house cottage farm croft tractor van car film book song programme program show band`,
  ),
  articles: set('the'),
  personBefore: set(
    'with and for to from like than by of about told asked except poor old young wee',
  ),
  capitalised: set(
    `i i'm i've i'd i'll mum mam mom mummy mammy dad daddy granny grandma grandpa grandad granda nana
     nan gran papa mama god lord jesus christ allah buddha bible koran quran heaven hell satan devil
     christmas easter ramadan eid diwali hanukkah passover halloween hogmanay boxing pentecost lent
     monday tuesday wednesday thursday friday saturday sunday mondays tuesdays wednesdays thursdays
     fridays saturdays sundays january february march april may june july august september october
     november december jan feb mar apr jun jul aug sept oct nov dec
     english british scottish welsh irish gaelic scots german french spanish italian dutch polish
     portuguese russian ukrainian swedish norwegian danish finnish icelandic european american
     african asian indian pakistani bangladeshi chinese japanese korean vietnamese thai arab arabic
     turkish kurdish syrian iraqi iranian afghan nigerian ghanaian kenyan somali jamaican caribbean
     mexican brazilian canadian australian latin greek hebrew romanian bulgarian hungarian czech
     lithuanian latvian estonian muslim muslims christian christians catholic catholics protestant
     protestants jewish jews jew hindu hindus sikh sikhs buddhist islam islamic christianity
     scotsman englishman irishman irishwoman englishwoman poles germans brits americans
     viking vikings roman romans victorian georgian edwardian norse celtic
     labour tory tories conservative conservatives liberal democrat democrats republican republicans
     greens brexit parliament government congress senate queen king prince princess president
     covid covid-19 corona coronavirus internet google facebook whatsapp twitter instagram tiktok
     youtube zoom skype netflix spotify amazon ebay microsoft apple android iphone ipad wifi wi-fi
     bluetooth tesco asda lidl aldi sainsbury's waitrose boots argos ikea starbucks mcdonald's
     mcdonalds coke coca-cola land rover toyota ford volvo bmw mercedes volkswagen excel powerpoint
     email ok okay tv uk usa us eu un nhs gp gps bbc itv pe it hr pa id cv mp mps msp dvd cd pc
     a&e ptsd adhd autism alzheimer's parkinson's dementia dna iq hiv aids mri ct ecg icu aa rnli
     phd msc bsc ba ma gcse gcses a-level a-levels o-level higher highers sats ofsted
     north south east west northern southern eastern western atlantic pacific mediterranean arctic
     baltic hi hello yes no yeah oh ah um uh er erm mm hmm well okay wow hey aye nah please sorry
     thanks interviewer participant researcher respondent moderator interviewee speaker transcript
     date time location recording duration lego barbie santa
     mother father sister brother auntie uncle aunt doctor nurse miss sir madam captain`,
  ),
  determiners: set('a an my your his our their this that these those some any no every each'),
  monthBefore: set(
    'in since until till by from to last next this early late mid of during every each before after around about',
  ),
};

const german: Cues = {
  titles: set(
    `herr herrn frau fräulein dr doktor prof professor professorin pfarrer pfarrerin schwester pater
     bruder onkel tante oma opa kapitän bürgermeister bürgermeisterin hebamme familie pastor`,
  ),
  relations: set(
    `mutter mama vater papa bruder schwester sohn tochter mann ehemann frau ehefrau freund freundin
     nachbar nachbarin kollege kollegin chef chefin cousin cousine nichte neffe tante onkel oma opa
     großmutter großvater enkel enkelin partner partnerin lehrer lehrerin hebamme ärztin arzt baby
     schwager schwägerin schwiegermutter schwiegervater bekannte bekannter kumpel mitbewohner
     mitbewohnerin betreuerin betreuer pflegerin pfleger tochter zwilling lebensgefährte`,
  ),
  naming: set('heißt hieß heiße heissen heißen namens genannt nannte'),
  doing: set(
    `sagte sagt hat hatte war ist kam kommt ging geht wollte will meinte meint fragte fragt rief wohnt
     wohnte arbeitet arbeitete starb half konnte kann wurde wird und erzählte erzählt dachte findet
     fand gab gibt nahm blieb lebt lebte zog macht machte weiß wusste kennt kannte`,
  ),
  placeBefore: set('in nach aus auf bei um nahe richtung'),
  placeWords: set(
    `straße strasse platz weg allee gasse ufer hafen insel inseln see berg tal dorf stadt kreis bad
     sankt st ober unter alt neu markt brücke park strand bucht`,
  ),
  organisationWords: set(
    `schule grundschule gymnasium hauptschule gesamtschule realschule universität hochschule klinik
     krankenhaus klinikum praxis kirche gemeinde verein verband gmbh ag kg ohg ev e.v. stiftung bank
     sparkasse volksbank hotel gasthof gasthaus apotheke museum amt ministerium kita kindergarten
     pflegeheim seniorenheim reederei werft brauerei bäckerei metzgerei verlag`,
  ),
  named: set('boot schiff fähre kutter hund katze pferd kuh kneipe hof haus film buch lied'),
  articles: set('der die das den dem des'),
  personBefore: set('mit und für von zu wie als bei an liebe lieber alte alter kleine kleiner'),
  capitalised: set(
    `ich sie ihr ihnen ihre ihren sie's gott montag dienstag mittwoch donnerstag freitag samstag sonntag
     sonnabend januar februar märz april mai juni juli august september oktober november dezember
     weihnachten ostern pfingsten mama papa oma opa corona internet google facebook whatsapp zoom`,
  ),
  determiners: set(
    'ein eine einen einem einer eines kein keine keinen keinem keiner mein meine meinen meinem meiner dein deine sein seine seinen seinem seiner ihr ihre ihren ihrem ihrer unser unsere unseren unserem unserer viel viele wenig alle jede jeder jeden jedes diese dieser dieses diesen welche zwei drei vier im am zum zur vom beim ins',
  ),
  monthBefore: set('im seit bis ab anfang ende mitte letzten nächsten diesen vom zum jeden'),
};

const french: Cues = {
  titles: set(
    `m mm mme mlle mr monsieur madame mademoiselle docteur dr professeur pr père soeur sœur frère maître
     me abbé oncle tante tonton tata mamie papi papy capitaine maire infirmière`,
  ),
  relations: set(
    `mère maman père papa frère soeur sœur fils fille mari femme copain copine compagnon compagne ami
     amie voisin voisine collègue cousin cousine nièce neveu tante oncle grand-mère grand-père mamie
     papi patron patronne chef cheffe prof professeur maîtresse instituteur sage-femme médecin bébé
     beau-frère belle-soeur belle-sœur belle-mère beau-père infirmière petit petite jumelle jumeau
     docteur gendre bru filleul filleule parrain marraine`,
  ),
  naming: set(
    `appelle appelait appelée appelé s'appelle s'appelait nomme nommé nommée prénom surnommé`,
  ),
  doing: set(
    `a avait est était dit disait m'a m'avait l'a va allait vient venait veut voulait pense pensait
     travaille travaillait habite habitait vit vivait aide aidait et qui fait faisait sait savait
     aime aimait parle parlait demande demandait répond connaît`,
  ),
  placeBefore: set(`à en vers chez sur près dans jusqu'à depuis`),
  placeWords: set(
    `rue avenue boulevard place chemin allée impasse quai pont port île îles mont val saint sainte bourg
     lac plage cap baie pointe forêt parc quartier cité ville bois`,
  ),
  organisationWords: set(
    `école collège lycée université hôpital clinique mairie église paroisse association société sarl sa
     sas eurl banque hôtel café restaurant pharmacie musée ministère centre crèche fondation syndicat
     conseil comité club boulangerie cabinet`,
  ),
  named: set(
    'bateau navire ferry chalutier voilier chien chienne chat chatte cheval bar maison film livre',
  ),
  articles: set(`le la les l' au aux du des`),
  personBefore: set('avec et comme chez'),
  capitalised: set(
    `je dieu noël pâques toussaint ramadan lundi mardi mercredi jeudi vendredi samedi dimanche janvier
     février mars avril mai juin juillet août septembre octobre novembre décembre français française
     anglais anglaise breton bretonne européen covid internet google facebook whatsapp zoom oui non bonjour bonsoir merci salut`,
  ),
  determiners: set(
    'un une mon ma mes ton ta tes son sa ses notre nos votre vos leur leurs ce cet cette ces',
  ),
  monthBefore: set('en depuis fin début mi de dès avant après'),
};

const spanish: Cues = {
  titles: set(
    `señor señora señorita sr sra srta don doña d dña doctor doctora dr dra profesor profesora padre
     hermano hermana sor tío tía abuelo abuela capitán alcalde alcaldesa maestro maestra fray`,
  ),
  relations: set(
    `madre mamá padre papá hermano hermana hijo hija marido esposo mujer esposa novio novia amigo amiga
     vecino vecina compañero compañera primo prima sobrino sobrina tío tía abuelo abuela jefe jefa
     suegro suegra cuñado cuñada nuera yerno pareja maestra maestro profesor profesora matrona
     comadrona doctora doctor médico médica bebé nieto nieta gemela gemelo padrino madrina`,
  ),
  naming: set('llama llamaba llamado llamada llaman nombre apodado apodada'),
  doing: set(
    `dijo dice decía es era fue está estaba ha había tiene tenía vino viene iba va quería quiere
     trabaja trabajaba vive vivía ayudó ayuda y que me se sabe sabía habla hablaba preguntó murió`,
  ),
  placeBefore: set('en a hacia hasta desde cerca por'),
  placeWords: set(
    `calle avenida plaza paseo camino carretera puerto isla islas monte valle san santa santo lago playa
     cabo bahía punta parque barrio pueblo ciudad río sierra puente`,
  ),
  organisationWords: set(
    `escuela colegio instituto universidad hospital clínica ayuntamiento iglesia parroquia asociación
     sociedad sl sa banco hotel café restaurante farmacia museo ministerio centro fundación sindicato
     guardería consejo comité club panadería residencia cofradía`,
  ),
  named: set('barco buque ferry velero perro perra gato gata caballo bar casa película libro'),
  articles: set('el la los las al del'),
  personBefore: set('con y como querida querido'),
  capitalised: set(
    `yo dios navidad pascua ramadán lunes martes miércoles jueves viernes sábado domingo enero febrero
     marzo abril mayo junio julio agosto septiembre octubre noviembre diciembre usted ustedes ud uds
     covid internet google facebook whatsapp zoom sí no hola gracias buenas buenos`,
  ),
  determiners: set(
    'un una unos unas mi mis tu tus su sus nuestro nuestra este esta ese esa estos estas',
  ),
  monthBefore: set('en desde hasta de a finales principios'),
};

const byLanguage: Readonly<Record<string, Cues>> = {
  eng: english,
  deu: german,
  fra: french,
  spa: spanish,
};

/** The cues of a language, ISO 639-3; of English for languages without any. */
export function cuesOf(language: string): Cues {
  return byLanguage[language] ?? english;
}

const germanNouns = set(
  `bauer fischer koch müller wagner wolf berg klein lang schmidt schneider weber meister becker richter
   könig kaiser bischof fürst graf vogt schuster zimmermann jäger förster hirsch fuchs hase vogel
   hahn adler falke kraus groß kurz weiß schwarz braun roth grün stern sommer winter herbst frühling
   morgen abend sonntag montag freitag busch baum wald bach stein feld garten haus hof kirche dorf
   stadt land see fluss strand hafen insel schiff boot kutter netz fisch brot käse butter milch wein
   bier salz pfeffer zucker kohl bohne kraut apfel pfund geld gold silber eisen stahl hammer nagel
   messer löffel gabel teller topf krug ring kette krone engel teufel held ritter krieger bürger
   gast wirt bote reich arm gut böse schön jung alt neu frank frei ernst herz liebe glück freude
   mut angst zeit tag nacht jahr monat woche stunde minute anfang ende weg platz markt tor brücke
   turm burg schloss tür fenster wand dach boden keller zimmer küche bett tisch stuhl bank halle
   essen leer singen regen hagen siegen weil welt menschen mensch kind kinder frau mann herr bruder
   schwester mutter vater sohn tochter onkel tante oma opa leute freund nachbar arbeit beruf schule
   lehrer arzt pfarrer priester mönch nonne will rose rosen heide linde eiche kern sand sturm wind
   schnee eis hitze sonne mond licht schatten feuer wasser luft erde himmel hölle post zug bahn auto
   rad bus straße reise ferien urlaub fest feier spiel ball sport verein musik lied tanz bild buch
   brief wort satz sprache frage antwort rat hilfe kraft macht recht pflicht grund folge fall ding
   sache stück teil seite ecke rand mitte stelle ort raum leben tod krankheit schmerz wunde blut
   kopf auge ohr nase mund hand fuß bein arm finger haut haar bart`,
);

/** German nouns and adjectives that are surnames or places as well: no name without more to go by. */
export function isGermanNoun(word: string): boolean {
  return germanNouns.has(word);
}

const romanceWords = set(
  `pierre rose claire marine aurore victoire blanche juste clément constant parfait prudence désiré
   fleur olive ange noble petit grand roux blanc noir brun sage gentil bon bonne belle beau jolie
   luz paz dolores mercedes pilar consuelo soledad sol cruz ángel salvador rosario socorro esperanza
   fe caridad milagros rosa flor nieves gloria victoria blanca marina mar guerra moreno rubio delgado
   bueno calvo rico pobre casa luna gracia gracias domingo mayo abril martes mira marca tal mal sal`,
);

export function isRomanceWord(word: string): boolean {
  return romanceWords.has(word);
}
