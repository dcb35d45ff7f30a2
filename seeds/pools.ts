/** Invented people, places and titles. Names test the alphabet; no combination is meant to be a real person. */
export interface Seed {
  given: string;
  family: string;
  country: string;
  affiliation: string;
  zone: string;
}

const places: [country: string, zone: string, institutes: string[], given: string[], family: string[]][] = [
  [
    'VN',
    'Asia/Ho_Chi_Minh',
    ['Viện Toán Sông Hồng', 'Đại học Bãi Giữa'],
    ['Khôi', 'Hằng', 'Quỳnh Như', 'Đức', 'Thảo', 'Minh'],
    ['Ngô', 'Bùi', 'Đặng', 'Huỳnh', 'Vũ'],
  ],
  [
    'NO',
    'Europe/Oslo',
    ['Norrhamn University', 'Fjordby University'],
    ['Ludvika', 'Aurelia', 'Eirik', 'Solveig', 'Håkon'],
    ['Brandvold', 'Sørensdatter', 'Fjæreby', 'Ås', 'Østmo'],
  ],
  [
    'RS',
    'Europe/Belgrade',
    ['Zlatna Academy'],
    ['Đorđe', 'Milica', 'Žarko', 'Ljubica'],
    ['Šćepanović', 'Milutinović', 'Đukić', 'Čolaković'],
  ],
  [
    'NG',
    'Africa/Lagos',
    ['Ikenga Institute', 'Umunna University'],
    ['Chidinma', 'Adaeze', 'Tolúwanimi', 'Kwabena'],
    ['Okwuosa', 'Nwosu-Hjelm', 'Adéyẹmí', 'Ọbáfẹ́mi'],
  ],
  [
    'PL',
    'Europe/Warsaw',
    ['Żurawia School of Geometry'],
    ['Władysława', 'Zdzisław', 'Łucja', 'Józefa'],
    ['Żórawska', 'Wierzbołowska', 'Łabędź-Morris', 'Pszczółkowski'],
  ],
  [
    'BR',
    'America/Sao_Paulo',
    ['Univ. Serra Clara'],
    ['Tiago', 'João', 'Conceição', 'Antônia'],
    ['Brito Valadares', 'Ferreira Dantas', 'Magalhães-Peçanha', 'Simões'],
  ],
  [
    'FI',
    'Europe/Helsinki',
    ['Kuura Polytechnic'],
    ['Aino', 'Väinö', 'Päivi', 'Eero'],
    ['Lehtisaari', 'Ylipelto', 'Hämäläissuo', 'Kääpä'],
  ],
  [
    'IN',
    'Asia/Kolkata',
    ['Sahyadri Mathematical College', 'Kaveri Institute'],
    ['Rohan', 'Anaïka', 'Meenakshi', 'Suryakanth'],
    ['Deshkulkarni', 'Ramanathapura', 'Bhattarayan', 'Iyengarh'],
  ],
  [
    'HU',
    'Europe/Budapest',
    ['Tisza University'],
    ['Eszter', 'Gergő', 'Zsófia', 'Bálint'],
    ['Szabadkai-Nagy', 'Szűcsfalvi', 'Őzike', 'Gyöngyössy'],
  ],
  [
    'LT',
    'Europe/Vilnius',
    ['Vilkija University'],
    ['Jokūbas', 'Rasa', 'Žygimantas'],
    ['Gervinskas', 'Žemaitytė-Rūta', 'Šimkūnas'],
  ],
  [
    'KZ',
    'Asia/Almaty',
    ['Altyn University'],
    ['Yerlan', 'Aigerim', 'Nursultanbek'],
    ['Abdikarim', 'Zhumagulova', 'Sätbekov'],
  ],
  [
    'CA',
    'America/Toronto',
    ['Université du Saguenois'],
    ['Marie-Ève', 'Loïc', 'Anne-Sophie'],
    ['Larocque-Tessier', 'Bélanger-Roy', 'Côté-Duchesne'],
  ],
  [
    'SE',
    'Europe/Stockholm',
    ['Lule Technical Institute'],
    ['Oskar', 'Åsa', 'Björn', 'Märta'],
    ['Fjällström', 'Lindqvist-Ofori', 'Ängström-Ek', 'Öberghem'],
  ],
  [
    'ZA',
    'Africa/Johannesburg',
    ['Umvoti University'],
    ['Thandeka', 'Sipho', 'Nomvula'],
    ['Mkhwanazi', 'Dlaminiwe', 'Botha-Nkosi'],
  ],
  [
    'IS',
    'Atlantic/Reykjavik',
    ['Hvammur University'],
    ['Ísold', 'Þórunn', 'Ægir'],
    ['Hrafnkelsdóttir', 'Þorbergsson', 'Ólafsdóttir-Lind'],
  ],
  [
    'ES',
    'Europe/Madrid',
    ['Universidad de Montalbo'],
    ['Lucía', 'Iñaki', 'Begoña', 'Núria'],
    ['Ferrán Estévez', 'Etxebarrieta', 'Muñozabal', 'Güell-Oriol'],
  ],
  [
    'AM',
    'Asia/Yerevan',
    ['Arpa Institute'],
    ['Davit', 'Anahit', 'Tigranuhi'],
    ['Ghazaryan-Petrosyan', 'Hakobjanian', 'Sargsyants'],
  ],
  [
    'CL',
    'America/Santiago',
    ['Universidad Austral Llanquén'],
    ['Sofía', 'Matías', 'Ximena'],
    ['Arancibia Pehuén', 'Núñez-Llao', 'Quilapán'],
  ],
  [
    'EE',
    'Europe/Tallinn',
    ['Emajõe College'],
    ['Kristjan', 'Õnne', 'Küllike'],
    ['Põldmaa', 'Jõgisalu', 'Mäeküla'],
  ],
  [
    'GE',
    'Asia/Tbilisi',
    ['Rioni University'],
    ['Tamar', 'Giorgi', 'Nino'],
    ['Kvaratskheli', 'Beridzeva', 'Lomtatidze-Orb'],
  ],
  [
    'RO',
    'Europe/Bucharest',
    ['Universitatea Oltului'],
    ['Ilinca', 'Ștefan', 'Ioniță'],
    ['Brâncoveanu-Ion', 'Țepeluș', 'Năstăsescu'],
  ],
  [
    'DE',
    'Europe/Berlin',
    ['Hochschule Kaltenau'],
    ['Maximilian', 'Käthe', 'Jürgen', 'Friederike'],
    ['Obersteiner', 'Weißmüller', 'Großkreuz', 'Lüdersdorff'],
  ],
  [
    'TR',
    'Europe/Istanbul',
    ['Gökova Üniversitesi'],
    ['Iğdır', 'Şebnem', 'Çağrı', 'Ümit'],
    ['Karaosmanoğlu', 'Yıldızeli', 'Şahinkaya', 'Öztürkmen'],
  ],
  [
    'EG',
    'Africa/Cairo',
    ['Nahda Institute'],
    ['Nadia', 'Karim', 'Salma'],
    ['El-Shirbini', 'Abd al-Wahid', "Ra'fatawi"],
  ],
  [
    'JP',
    'Asia/Tokyo',
    ['Kasumi University'],
    ['Haruka', 'Shōta', 'Yūko'],
    ['Minatogawa', 'Ōtakehara', 'Kōdzuki'],
  ],
  [
    'MX',
    'America/Mexico_City',
    ['Instituto Xochitla'],
    ['Itzel', 'Ramón', 'Citlali'],
    ['Xicoténcatl', 'Peñaloza-Ríos', 'Ahumada'],
  ],
  [
    'IE',
    'Europe/Dublin',
    ['Inis College'],
    ['Aoife', 'Ciarán', 'Sorcha'],
    ['Ní Bhraonáin', "O'Muirgheasa", 'Mac Giolla'],
  ],
  [
    'NZ',
    'Pacific/Auckland',
    ['Rimu University'],
    ['Aroha', 'Tāne', 'Ngaio'],
    ['Te Whārangi', 'Kahananui', 'Pōtatau'],
  ],
  [
    'US',
    'America/Denver',
    ['Larkspur State University'],
    ['Madison', 'Ezekiel', 'Priya'],
    ['Quist', 'Ashgrove', 'Mbeki-Strand'],
  ],
  [
    'FR',
    'Europe/Paris',
    ['Université de Valmorel'],
    ['Hélène', 'Aurélien', 'Maëlys'],
    ["d'Aubremont", 'Lefèvre-Noyer', 'Châtelguyon'],
  ],
];

/** `count` different people, spread over all countries; always the same ones. */
export function people(count: number): Seed[] {
  const list: Seed[] = [];
  for (let round = 0; list.length < count; round++) {
    const [country, zone, institutes, given, family] = places[
      round % places.length
    ] as (typeof places)[number];
    const turn = Math.floor(round / places.length);
    const pairs = given.length * family.length;
    const pair = (turn * 7 + (round % places.length)) % pairs;
    const suffix = turn >= pairs ? ` ${'ABCDEFGHIJKLMNOPQRSTUVWXYZ'[Math.floor(turn / pairs) % 26]}.` : '';
    list.push({
      given: (given[pair % given.length] as string) + suffix,
      family: family[(Math.floor(pair / given.length) + turn) % family.length] as string,
      country,
      affiliation: institutes[turn % institutes.length] as string,
      zone,
    });
  }
  return list;
}

export interface CourseSeed {
  letter: string;
  title: string;
  shortTitle: string;
  msc: string;
  lectures: string[];
}

/** Lecture courses of the summer school; every title is invented. */
export const courses: CourseSeed[] = [
  {
    letter: 'A',
    title: 'Substitution tilings and their cohomology',
    shortTitle: 'Tilings',
    msc: '52C23',
    lectures: [
      'Tiles, patches and the hull $\\Omega$',
      'Inflation and the Perron eigenvalue',
      'The transversal as an inverse limit',
      'The group $\\check{H}^1(\\Omega;\\mathbb{Z})\\cong\\mathbb{Z}^5$',
      'Gap labels and deformations',
    ],
  },
  {
    letter: 'B',
    title: 'Quandles, knots and surfaces',
    shortTitle: 'Quandles',
    msc: '57K10',
    lectures: [
      'Colourings of diagrams',
      'The fundamental quandle',
      'Cocycles and state sums',
      'The fundamental quandle of $F\\subset S^4$',
      'Extensions and coverings',
    ],
  },
  {
    letter: 'C',
    title: 'Polytopes, f-vectors and Ehrhart theory',
    shortTitle: 'Polytopes',
    msc: '52B20',
    lectures: [
      'Counting lattice points',
      'Generating functions',
      'Reciprocity',
      'Ehrhart series and $h^*$-vectors',
      'Unimodular covers',
    ],
  },
  {
    letter: 'D',
    title: 'Packings and spectral bounds',
    shortTitle: 'Packings',
    msc: '52C17',
    lectures: [
      'Densities $\\Delta$',
      'Linear programming bounds',
      'Lattices that pack badly: $\\Delta\\le 2^{-n+o(n)}$',
      'Kissing configurations',
    ],
  },
  {
    letter: 'E',
    title: 'Rigidity of frameworks',
    shortTitle: 'Rigidity',
    msc: '52C25',
    lectures: ['Stresses and motions', 'Sparsity $2n-3$', 'Symmetric frameworks', 'Tensegrity'],
  },
  {
    letter: 'F',
    title: 'Braids and mapping classes',
    shortTitle: 'Braids',
    msc: '20F36',
    lectures: ['Presentations of $B_n$', 'Normal forms', 'Entropy of braids', 'Curves on surfaces'],
  },
  {
    letter: 'G',
    title: 'Discrete differential geometry',
    shortTitle: 'Discrete surfaces',
    msc: '53A70',
    lectures: ['Discrete curvature', 'Circle patterns', 'Nets and transformations', 'Convergence'],
  },
  {
    letter: 'H',
    title: 'Incidence geometry and sum-products',
    shortTitle: 'Incidences',
    msc: '52C10',
    lectures: [
      'Points and lines',
      'Crossing numbers',
      'Polynomial partitions',
      'Energy $E(A)\\ll |A|^{3-c}$',
    ],
  },
];

/** Titles and sentences for contributed and invited talks. */
export const talkTitles = [
  'Tiling billiards and Arnoux-type words',
  'Seifert matrices over finite fields',
  'Weaving textiles from two-bridge links',
  'Which convex bodies tile by translation?',
  'A zoo of monotiles',
  'Knots that know their bridge number',
  'Lattices that pack badly, and why it helps',
  'Spectral gaps of random coverings',
  'Colouring by dihedral quandles',
  'Ehrhart series by hand',
  'Cohomology of the rhomb hull',
  'Linear programming bounds in small dimension',
  'Circle patterns on the torus',
  'Rigid motions of hinged tilings',
  'Flips in triangulations of $\\Delta_n\\times\\Delta_m$',
  'The diameter of flip graphs',
  'A bound $|A+A|\\gg |A|^{4/3}$ without lines',
  'Unit distances and $K_{2,3}$-free graphs',
  'Signed graphs and spectral radius',
  'Hypergraph matchings of nearly perfect size',
  'Chromatic polynomials of wheels with spokes missing',
  'Random lifts of bipartite graphs',
  'Permutation patterns and growth rates',
  'Sperner families in product posets',
  'Matroids that resist excluded minors',
  'Parking functions on caterpillars',
  'Symmetric chains in $L(m,n)$',
  'Enumerating alternating sign cubes',
  'Posets of noncrossing trees',
  'Cap sets and slice rank, a slow introduction',
  'Visible lattice points in thin strips',
  'Primitive points on spheres',
  'Counting $\\gcd$-free boxes',
  'Minkowski sums with few vertices',
  'Flatness of lattice-free bodies',
  'Successive minima by example',
  'Reduction of bases with bounded depth',
  'Zonotopes and their coverings',
  'The covering radius of a simplex',
  'Lattice points near a helix',
];

const ideas = [
  'We study the case in which every local configuration is determined by its neighbours, and show that the number of patches of radius $r$ grows like $c\\,r^2$.',
  'Let $\\Lambda\\subset\\mathbb{R}^n$ be a lattice of covolume one. We show that the associated counting function satisfies $N(R)=\\mathrm{vol}(B)R^n+O(R^{n-2+\\varepsilon})$.',
  'For almost every direction $\\theta$ the limit \\[ \\lim_{n\\to\\infty}\\frac1n\\log\\|A_n\\cdots A_1\\|=\\lambda_1>0 \\] exists and does not depend on the starting point.',
  'The proof is elementary: a double count, an inequality between means, and a picture with $2k+1$ points.',
  'As a consequence the invariant takes only finitely many values on knots with at most $n$ crossings, and it can be computed in time $O(n\\log n)$.',
  'We give examples with $|A+A|\\le K|A|$ for which no large structured subset exists, and ask whether $K^{1+o(1)}$ can be reached.',
  'The group in question is an extension $1\\to\\mathbb{Z}^d\\to G\\to W\\to 1$, and its growth series is rational.',
  'Joint drawings, a deck of cards and a little linear algebra over $\\mathbb{F}_2$ are all that is needed.',
];

/** An invented abstract with mathematics; always the same for the same number. */
export function abstractFor(n: number): string {
  const pick = (k: number): string => ideas[(n * 3 + k * 5) % ideas.length] as string;
  return `${pick(0)} ${pick(1)}\n\n${pick(2)}`;
}
