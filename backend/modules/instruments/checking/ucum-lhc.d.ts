/** The part of the UCUM package that is used here; it ships no types. */
declare module '@lhncbc/ucum-lhc' {
  interface UnitVerdict {
    status: 'valid' | 'invalid' | 'error';
    ucumCode: string | null;
    msg: string[];
    suggestions?: { units: [code: string, name: string, remark: string][] }[];
  }
  const ucum: {
    UcumLhcUtils: { getInstance(): { validateUnitString(code: string, suggest: boolean): UnitVerdict } };
  };
  export default ucum;
}
