/** The trade's words in headings, in English, German and French, and what they say a column is. First match counts. */
export type Role =
  /** Numbers the rows or tells the state of the test. */
  | 'counter'
  /** Not a channel: commands, rates, extremes, temperatures, computed columns. */
  | 'other'
  /** A mean of columns that stand beside it; a channel only when they do not. */
  | 'mean'
  /** The machine's travel, never strain. */
  | 'stroke'
  /** A displacement: of the machine or on the specimen, the word does not say. */
  | 'displacement'
  | 'time' | 'stress' | 'force' | 'transverse' | 'strain' | 'trace';

const WORDS: readonly (readonly [Role, RegExp])[] = [
  ['counter', /^(nr|no|n|id|row|line|point|punkt|sample|record|scan|segment|step|schritt|date|datum)\.?$|#|\b(index|number|numéro|nummer|count|counter|cycles?|zyklus|status|state|marker|flag|remark|comment|event)\b/i],
  ['other', /\b(command|setpoint|set[ -]point|target|soll\w*|consigne)\b|soll(wert)?\b|\b(rate|speed|velocity|vitesse)\b|geschwindigkeit|\b(max|min|peak|pic)\b\.?|maximum|minimum/i],
  ['other', /temp\b|temp[eé]rat|humid|feucht|confin|manteldruck|\b(pore|oil|cell|chamber) pressure|volum|\b(plastic|shear|true|residual)\b|wahre|energy|\bwork\b|bending/i],
  ['mean', /\b(mean|average|avg)\b|mittel|moyen/i],
  ['time', /\btime\b|zeit\b|\btemps\b|^t$|elapsed|\bclock\b|seconds|\buhr/i],
  ['stroke', /cross-?head|\bstroke\b|traverse|\btravel\b|position|actuator|\bram\b|piston|platen|\bcourse\b|vérin|weg\b|\bhub\b|\bmachine (ext|disp|travel)/i],
  ['transverse', /transv|trans\b|\blat(eral)?\b|quer|circumf|umfang|diametr|hoop|radial|\bt[12]\b|latéral/i],
  ['displacement', /displ|\bdisp\b|verschiebung|déplacement|deplacement/i],
  ['stress', /stress|spannung|contrainte|^(σ|sigma)$/i],
  ['force', /\bload|force\b|kraft|\bcharge\b|^[fp]$|\blast\b|prüflast/i],
  ['strain', /strain|dehnung|stauchung|déform|deform|exten|\bext\d?\b|axial|\bax\d?\b|longitud|längs|laengs|elong|allonge|gauge|gage|\bsg\s?\d|\bdms\b|lvdt|^(ε|eps|epsilon)/i],
  ['trace', /ampl|volt|signal|trace|\bch\w*\s*\d*\b|shot|\bcoupling\b|\b[ps][ -]?wave\b/i],
];

/** What a heading's own words say; null when they say nothing. */
export function roleOfHeading(heading: string): Role | null {
  return WORDS.find(([, pattern]) => pattern.test(heading))?.[0] ?? null;
}
