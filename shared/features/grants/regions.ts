/**
 * The region of a country, for readers who may know where somebody comes from but not which country.
 * Source: United Nations Statistics Division, Standard Country or Area Codes for Statistical Use (M49): the
 * intermediate regions where there are some, else the sub-regions. TW and XK have no entry of their own there and are
 * put beside their neighbours.
 */
const REGIONS: Record<string, string> = {
  'Northern Africa': 'DZ EG LY MA SD TN EH',
  'Eastern Africa': 'IO BI KM DJ ER ET TF KE MG MW MU YT MZ RE RW SC SO SS UG TZ ZM ZW',
  'Middle Africa': 'AO CM CF TD CG CD GQ GA ST',
  'Southern Africa': 'BW SZ LS NA ZA',
  'Western Africa': 'BJ BF CV CI GM GH GN GW LR ML MR NE NG SH SN SL TG',
  Caribbean: 'AI AG AW BS BB BQ VG KY CU CW DM DO GD GP HT JM MQ MS PR BL KN LC MF VC SX TT TC VI',
  'Central America': 'BZ CR SV GT HN MX NI PA',
  'South America': 'AR BO BV BR CL CO EC FK GF GY PY PE GS SR UY VE',
  'Northern America': 'BM CA GL PM US',
  'Central Asia': 'KZ KG TJ TM UZ',
  'Eastern Asia': 'CN HK MO KP JP MN KR TW',
  'South-eastern Asia': 'BN KH ID LA MY MM PH SG TH TL VN',
  'Southern Asia': 'AF BD BT IN IR MV NP PK LK',
  'Western Asia': 'AM AZ BH CY GE IQ IL JO KW LB OM QA SA PS SY TR AE YE',
  'Eastern Europe': 'BY BG CZ HU PL MD RO RU SK UA',
  'Northern Europe': 'AX DK EE FO FI GG IS IE IM JE LV LT NO SJ SE GB',
  'Southern Europe': 'AL AD BA HR GI GR VA IT MT ME MK PT SM RS SI ES XK',
  'Western Europe': 'AT BE FR DE LI LU MC NL CH',
  'Australia and New Zealand': 'AU CX CC HM NZ NF',
  Melanesia: 'FJ NC PG SB VU',
  Micronesia: 'GU KI MH FM NR MP PW UM',
  Polynesia: 'AS CK PF NU PN WS TK TO TV WF',
  Antarctica: 'AQ',
};

const BY_COUNTRY = new Map(
  Object.entries(REGIONS).flatMap(([region, codes]) =>
    codes.split(' ').map((code) => [code, region] as const),
  ),
);

/** Region of an ISO 3166-1 alpha-2 code; `Not stated` for none. */
export const regionOf = (country: string | null): string =>
  (country && BY_COUNTRY.get(country)) || 'Not stated';
