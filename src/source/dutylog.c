#include "source/dutylog.h"

#include "source/source_rows.h"

/*
 * What is said at a post, made of the words of that post: <x-thing> and so on.
 * The line's post settles x, so each sentence is read with its own words.
 */
#define SENTENCE(x)                                                         \
	{x "-line",                                                         \
	 "The <" x "-thing> <" x "-did><tail>|"                             \
	 "<who> <" x "-acted> the <" x "-thing><tail>|"                     \
	 "Found the <" x "-kind> <" x "-thing> <state><tail>|"              \
	 "We <" x "-acted> the <" x "-thing> and the <" x "-thing><tail>|"  \
	 "No change in the <" x "-thing><tail>|"                            \
	 "Read <digit>.<digit><digit> m at the <place><tail>|"              \
	 "Asked <who> to look at the <" x "-kind> <" x "-thing><tail>|"     \
	 "Still <state> at the <place>, so the <" x "-thing> <must><tail>|" \
	 "Nothing from the <place> but <weather><tail>|"                    \
	 "Logged <digit><digit> of the <" x "-thing> for <who><tail>",      \
	 false},                                                            \
		{x "-more", "\n| <" x "-line>\n", false},                   \
		{x "-most", "\n| <" x "-line><" x "-more>", false},         \
	{                                                                   \
		x "-talk", "<" x "-line><" x "-most>", false                \
	}

const struct phrase dutylog_phrases[] = {
	{"digit", "0|1|2|3|4|5|6|7|8|9", true},
	{"hour",
	 "00|01|02|03|04|05|06|07|08|09|10|11|12|13|14|15|16|17|18|19|20|21|"
	 "22|23",
	 true},
	{"five", "00|05|10|15|20|25|30|35|40|45|50|55", true},
	{"who",
	 "Tallis|Orme|Quillan|Braddock|Fenwick|Isolde Marsh|Penhale|Rusk|"
	 "Dorrity|Yarrow|Castellane|Hobday|Vance|Ludlow|Merrin|Oakshott|"
	 "Trevanion|Abara|Nakashe|Sorrel|Jessop|Wick|Ellery|Pardoe|Gannet|"
	 "Ibsley|Morwen|Thackeray|Zelle|Unwin|Kestle|Lacey|Dunmore|Peverell|"
	 "Hask|Ravenhill",
	 false},
	{"place",
	 "north mole|heron slip|saltern gate|eel ladder|cold harbour|"
	 "mussel bank|ferry stage|withy pool|kiln reach|outer buoy|"
	 "tern island|grey spit|brine well|osier bend|pilot steps|"
	 "sluice house|marrow bridge|cockle flats|lantern point|mill race|"
	 "weir top|dunlin creek|chapel quay|sandglass bar",
	 false},
	{"weather",
	 "fog|drizzle|light wind|steady rain|haze|sleet|swell|hail|"
	 "thunder|broken cloud|spray|frost|still air|gusts|sunshine|driving "
	 "snow",
	 false},
	{"mishap",
	 "short outage|blown fuse|dropped line|late tide|loose hatch|false "
	 "alarm|fouled screw|lost signal|leaking joint|stuck relay|broken "
	 "shackle|missed call",
	 false},
	{"cause",
	 "the <weather>|a <mishap>|low water|high water|slack water|dawn|"
	 "dusk|another <mishap>|breakfast|midnight",
	 false},
	{"how",
	 "again|slowly|without trouble|as planned|quietly|twice|for an hour|"
	 "by hand|on time|too late|all night|steadily|in part|since noon|"
	 "overnight|briefly|with care|hardly|once more|early",
	 false},
	{"watched",
	 "watched|waited|took notes|slept|held the lamp|called the office|"
	 "kept time|made tea|went below|read the staff",
	 false},
	{"rest",
	 "<how>.|after <cause>.|until <hour><five>.|before <cause>.|near the "
	 "<place>.|while <who> <watched>.|despite <weather>.",
	 false},
	{"tail", ".| <rest>", false},
	{"state",
	 "dry|wet|open|shut|clean|loose|blocked|warm|damaged|in order|"
	 "half full|out of true|frozen|quiet|unlit|badly worn|missing|sound",
	 false},
	{"must",
	 "must wait|needs oil|goes ashore|can stay|will be changed|should "
	 "hold|comes off|may run",
	 false},
	{"pump-thing",
	 "pump|valve|strainer|bearing|sump|gauge|motor|hose|flange|impeller|"
	 "gland|float|manifold|coupling|starter|bilge|priming cup|drain|"
	 "gasket|pressure line",
	 false},
	{"pump-did",
	 "ran|stopped|started|tripped|leaked|held pressure|overheated|"
	 "rattled|choked|lost suction|settled|idled",
	 false},
	{"pump-acted",
	 "cleaned|greased|primed|bled|replaced|tightened|isolated|drained|"
	 "tested|refitted|flushed|stripped",
	 false},
	{"pump-kind",
	 "main|spare|lower|upper|old|second|port|auxiliary|rusted|diesel|"
	 "electric|wooden",
	 false},
	SENTENCE("pump"),
	{"boat-thing",
	 "launch|dinghy|mooring|anchor|fender|oar|engine|painter|tiller|"
	 "radio|locker|compass|ensign|rowlock|towline|chart|lamp|davit|"
	 "keel|rudder",
	 false},
	{"boat-did",
	 "dragged|came alongside|drifted|went out|returned|grounded|broke "
	 "free|swung|parted|cast off|rode well|filled",
	 false},
	{"boat-acted",
	 "towed|moored|bailed|painted|checked|hauled|signalled|launched|"
	 "lashed|borrowed|beached|hailed",
	 false},
	{"boat-kind",
	 "grey|small|survey|pilot|visiting|blue|flat|heavy|patched|new|"
	 "abandoned|fast",
	 false},
	SENTENCE("boat"),
	{"bird-thing",
	 "heron|tern|dunlin|flock|roost|nest|curlew|seal|hide|colony|egret|"
	 "otter|ringing net|cormorant|eider|tally|chick|shoal|kelp bed|"
	 "sandpiper",
	 false},
	{"bird-did",
	 "fed|left|settled|rose|moved upstream|returned|called|scattered|"
	 "waded|dived|nested|circled",
	 false},
	{"bird-acted",
	 "counted|sighted|ringed|photographed|followed|disturbed|weighed|"
	 "heard|released|missed|sketched|recorded",
	 false},
	{"bird-kind",
	 "young|lone|large|wintering|ringed|common|breeding|injured|pale|"
	 "western|noisy|resident",
	 false},
	SENTENCE("bird"),
	{"mast-thing",
	 "anemometer|mast|aerial|logger|battery|cable|rain gauge|shelter|"
	 "thermometer|barometer|vane|panel|beacon|clock|modem|guy wire|"
	 "bulb|recorder|antenna|fuse box",
	 false},
	{"mast-did",
	 "froze|dropped out|recovered|read high|sagged|restarted|swayed|"
	 "charged|lagged|drifted|flickered|failed",
	 false},
	{"mast-acted",
	 "rebooted|calibrated|levelled|rewired|dried|reset|swapped|earthed|"
	 "inspected|logged|charged|compared",
	 false},
	{"mast-kind",
	 "north|spare|solar|sheltered|temporary|bent|backup|digital|tall|"
	 "corroded|brass|faulty",
	 false},
	SENTENCE("mast"),
	{"gate-thing",
	 "gate|sluice|paddle|winch|chain|sill|fish pass|ladder|screen|weir|"
	 "culvert|penstock|boom|grating|lock|spindle|apron|staff gauge|"
	 "walkway|handrail",
	 false},
	{"gate-did",
	 "opened|closed|jammed|lifted|overtopped|seeped|held|silted up|"
	 "vibrated|dropped|creaked|cleared",
	 false},
	{"gate-acted",
	 "raised|lowered|cleared|wedged|measured|freed|scraped|sounded|"
	 "opened|closed|barred|dredged",
	 false},
	{"gate-kind",
	 "east|west|tidal|steel|inner|outer|fourth|flooded|narrow|stone|"
	 "manual|weedy",
	 false},
	SENTENCE("gate"),
	{"post",
	 "pump house: <pump-talk>|tide gate: <gate-talk>|met mast: "
	 "<mast-talk>|boat shed: <boat-talk>|long hide: <bird-talk>",
	 false},
	{"entry", "<hour><five> <who>, <post>", false},
};

const uint32_t dutylog_phrase_count =
	sizeof(dutylog_phrases) / sizeof(dutylog_phrases[0]);

/* Bits of a line over its mean length: renewal-reward, as the lines are
 * independent and end in a newline. */
static double dutylog_rate(void)
{
	struct grammar grammar;
	const struct grammar_phrase *entry;

	grammar_init(&grammar, dutylog_phrases, dutylog_phrase_count);
	entry = &grammar.compiled[grammar.count - 1];
	return entry->bits / entry->bytes;
}

static void dutylog_generate(struct source_stream *stream, uint64_t seed)
{
	struct random_stream random;
	struct grammar grammar;

	grammar_init(&grammar, dutylog_phrases, dutylog_phrase_count);
	random_init(&random, seed, random_name("duty-log"));
	while (!stream_full(stream))
		grammar_write(&grammar, stream, &random);
}

const struct source source_dutylog = {
	.name = "duty-log",
	.summary = "English-like duty log: sentences from a grammar",
	.publication = "entropy of derivations, Grenander 1967; renewal-reward",
	.symbols = "byte",
	.records = "lines",
	.default_symbols = 1 << 21,
	.rate_exact = true,
	.bits_per_symbol = dutylog_rate,
	.generate = dutylog_generate,
};
