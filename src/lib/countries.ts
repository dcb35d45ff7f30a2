import countries from 'i18n-iso-countries';
import english from 'i18n-iso-countries/langs/en.json';

countries.registerLocale(english);

/** ISO 3166-1 countries by English name. */
export const countryOptions = Object.entries(countries.getNames('en', { select: 'official' }))
  .map(([value, label]) => ({ value, label }))
  .sort((a, b) => a.label.localeCompare(b.label, 'en'));

export const countryName = (code: string | null): string => (code && countries.getName(code, 'en')) || '';
