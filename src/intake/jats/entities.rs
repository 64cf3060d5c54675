//! Entities: numbers, names, and what the document's own subset declares.
//!
//! Nothing is fetched: an external subset is only named. Names are those of HTML 4.01 (section 24)
//! and the ISO 8879 and ISO 9573-13 sets that JATS brings in, with the characters that the W3C's
//! "XML Entity Definitions for Characters" gives them.

use std::collections::HashMap;
use std::sync::OnceLock;

/// How deep one declared entity may refer to others.
const DEEPEST: usize = 8;
/// The longest text that one declared entity may stand for, in bytes.
const LONGEST: usize = 2048;
/// The most references that are followed in all declarations of a document together.
const MOST_STEPS: usize = 100_000;
/// Text that declared entities may add beyond the length of the document, in bytes.
const ALLOWANCE: usize = 1 << 16;

/// What became of a reference.
#[derive(Debug, PartialEq, Eq)]
pub(super) enum Resolved {
    Text(String),
    Unknown,
    /// It would expand beyond reason.
    TooLarge,
}

/// The entities of one document.
pub(super) struct Entities<'a> {
    declared: HashMap<&'a str, &'a str>,
    known: HashMap<&'a str, Option<String>>,
    steps: usize,
    budget: usize,
}

impl<'a> Entities<'a> {
    pub fn new(document: &str) -> Entities<'a> {
        Entities {
            declared: HashMap::new(),
            known: HashMap::new(),
            steps: MOST_STEPS,
            budget: document.len().saturating_add(ALLOWANCE),
        }
    }

    /// Takes the declarations out of a document type. The first of a name holds, as in XML 1.0, section 4.2.
    pub fn declare(&mut self, doctype: &'a str) {
        let mut rest = doctype;
        while let Some(at) = rest.find("<!ENTITY") {
            rest = rest[at + 8..].trim_start();
            if rest.starts_with('%') {
                continue;
            }
            let end = rest.find(|c: char| c.is_whitespace() || c == '>').unwrap_or(rest.len());
            let (name, after) = rest.split_at(end);
            rest = after.trim_start();
            let Some(quote) = rest.chars().next().filter(|&c| c == '"' || c == '\'') else { continue };
            let Some(length) = rest[1..].find(quote) else { return };
            self.declared.entry(name).or_insert(&rest[1..1 + length]);
            rest = &rest[length + 2..];
        }
    }

    /// What `&name;` stands for; `name` may be a number, `#8211` or `#x2013`.
    pub fn resolve(&mut self, name: &'a str) -> Resolved {
        if let Some(text) = standing(name) {
            return Resolved::Text(text);
        }
        if !self.declared.contains_key(name) {
            return Resolved::Unknown;
        }
        if !self.known.contains_key(name) {
            let mut text = String::new();
            let whole = self.expand(name, 0, &mut text).is_some();
            self.known.insert(name, whole.then_some(text));
        }
        match self.known.get(name) {
            Some(Some(text)) if text.len() <= self.budget => {
                self.budget -= text.len();
                Resolved::Text(text.clone())
            }
            _ => Resolved::TooLarge,
        }
    }

    /// Writes what a declared entity stands for, without its tags; `None` if that goes beyond reason.
    fn expand(&mut self, name: &str, depth: usize, out: &mut String) -> Option<()> {
        self.steps = self.steps.checked_sub(1)?;
        if depth > DEEPEST {
            return None;
        }
        let mut rest = *self.declared.get(name)?;
        if rest.len() > LONGEST {
            return None;
        }
        while let Some(at) = rest.find(['&', '<']) {
            out.push_str(&rest[..at]);
            let tag = rest.as_bytes()[at] == b'<';
            rest = &rest[at + 1..];
            let Some(end) = rest.find(if tag { '>' } else { ';' }) else {
                out.push(if tag { '<' } else { '&' });
                continue;
            };
            let inner = &rest[..end];
            rest = &rest[end + 1..];
            if !tag {
                match standing(inner) {
                    Some(text) => out.push_str(&text),
                    None => self.expand(inner, depth + 1, out)?,
                }
            }
            if out.len() > LONGEST {
                return None;
            }
        }
        out.push_str(rest);
        (out.len() <= LONGEST).then_some(())
    }
}

/// A number or a name that needs no declaration. Characters without width stand for nothing.
fn standing(name: &str) -> Option<String> {
    let c = match name.strip_prefix('#') {
        Some(number) => {
            let code = match number.strip_prefix(['x', 'X']) {
                Some(hex) => u32::from_str_radix(hex, 16).ok()?,
                None => number.parse().ok()?,
            };
            char::from_u32(code).filter(|&c| c != '\0')?
        }
        None => *names().get(name)?,
    };
    Some(if is_nothing(c) { String::new() } else { c.to_string() })
}

/// Characters that a reader does not see: soft hyphens, joiners, byte order marks, invisible operators.
pub(super) fn is_nothing(c: char) -> bool {
    matches!(c, '\u{ad}' | '\u{200b}'..='\u{200d}' | '\u{2060}'..='\u{2064}' | '\u{feff}')
}

fn names() -> &'static HashMap<&'static str, char> {
    static MAP: OnceLock<HashMap<&'static str, char>> = OnceLock::new();
    MAP.get_or_init(|| {
        let mut words = NAMES.split_whitespace();
        let mut map = HashMap::new();
        while let (Some(name), Some(code)) = (words.next(), words.next()) {
            if let Some(c) = u32::from_str_radix(code, 16).ok().and_then(char::from_u32) {
                map.insert(name, c);
            }
        }
        map
    })
}

/// Names and code points in hexadecimal.
const NAMES: &str = "\
    AElig c6 Aacute c1 Abreve 102 Acirc c2 Agr 391 Agrave c0 Alpha 391 Amacr 100 Aogon 104 Aring c5 Atilde c3 \
    Auml c4 Beta 392 Bgr 392 Cacute 106 Ccaron 10c Ccedil c7 Cdot 10a Chi 3a7 Colon 2237 Copf 2102 Dagger 2021 \
    Dcaron 10e Delta 394 Dgr 394 Dstrok 110 EEgr 397 ETH d0 Eacute c9 Ecaron 11a Ecirc ca Edot 116 Egr 395 \
    Egrave c8 Emacr 112 Eogon 118 Epsilon 395 Eta 397 Euml cb Gamma 393 Gbreve 11e Ggr 393 IJlig 132 Iacute cd \
    Icirc ce Idot 130 Igr 399 Igrave cc Imacr 12a Iogon 12e Iota 399 Iuml cf KHgr 3a7 Kappa 39a Kgr 39a Lacute 139 \
    Lambda 39b Lcaron 13d Lgr 39b Lstrok 141 MediumSpace 205f Mgr 39c Mu 39c Nacute 143 Ncaron 147 Ngr 39d \
    NoBreak 2060 Ntilde d1 Nu 39d OElig 152 OHgr 3a9 Oacute d3 Ocirc d4 Odblac 150 Ogr 39f Ograve d2 Omacr 14c \
    Omega 3a9 Omicron 39f Oslash d8 Otilde d5 Ouml d6 PHgr 3a6 PSgr 3a8 Pgr 3a0 Phi 3a6 Pi 3a0 Prime 2033 Psi 3a8 \
    Racute 154 Rcaron 158 Rgr 3a1 Rho 3a1 Sacute 15a Scaron 160 Scedil 15e Sgr 3a3 Sigma 3a3 Sqrt 221a Sum 2211 \
    THORN de THgr 398 Tau 3a4 Tcaron 164 Tcedil 162 Tgr 3a4 Theta 398 ThinSpace 2009 Uacute da Ucirc db Udblac 170 \
    Ugr 3a5 Ugrave d9 Umacr 16a Uogon 172 Upsilon 3a5 Uring 16e Uuml dc Xgr 39e Xi 39e Yacute dd Yuml 178 \
    Zacute 179 Zcaron 17d Zdot 17b ZeroWidthSpace 200b Zeta 396 Zgr 396 aacute e1 abreve 103 acirc e2 acute b4 \
    aelig e6 agr 3b1 agrave e0 alefsym 2135 alpha 3b1 amacr 101 amp 26 and 2227 ang 2220 angst c5 aogon 105 ap 2248 \
    ape 224a apos 27 approx 2248 aring e5 ast 2a asymp 2248 atilde e3 auml e4 bcong 224c bdquo 201e becaus 2235 \
    because 2235 beta 3b2 bgr 3b2 blank 2423 blk12 2592 blk14 2591 block 2588 bprime 2035 breve 2d8 brvbar a6 \
    bsol 5c bull 2022 bullet 2022 bump 224e cacute 107 cap 2229 caron 2c7 ccaron 10d ccedil e7 cdot 10b cedil b8 \
    cent a2 centerdot b7 check 2713 chi 3c7 cir 25cb circ 2c6 circledR ae clubs 2663 colon 3a comma 2c commat 40 \
    compfn 2218 cong 2245 conint 222e copy a9 copysr 2117 crarr 21b5 cross 2717 cup 222a curren a4 dArr 21d3 \
    dagger 2020 darr 2193 dash 2010 dblac 2dd dcaron 10f deg b0 delta 3b4 dgr 3b4 diams 2666 divide f7 dollar 24 \
    dot 2d9 dstrok 111 dtri 25bf dtrif 25be eacute e9 ecaron 11b ecirc ea edot 117 eegr 3b7 egr 3b5 egrave e8 \
    ell 2113 emacr 113 empty 2205 emsp 2003 emsp13 2004 emsp14 2005 eng 14b ensp 2002 eogon 119 epsi 3b5 \
    epsilon 3b5 epsiv 3f5 equals 3d equiv 2261 eta 3b7 eth f0 euml eb euro 20ac excl 21 exist 2203 female 2640 \
    ffilig fb03 fflig fb00 ffllig fb04 filig fb01 flat 266d fllig fb02 fnof 192 forall 2200 frac12 bd frac13 2153 \
    frac14 bc frac15 2155 frac18 215b frac23 2154 frac34 be frac38 215c frac58 215d frac78 215e frasl 2044 gE 2267 \
    gamma 3b3 gbreve 11f gdot 121 ge 2265 geq 2265 geqslant 2a7e ges 2a7e ggr 3b3 gne 2a88 gsim 2273 gt 3e \
    hArr 21d4 hairsp 200a half bd harr 2194 hbar 210f hearts 2665 hellip 2026 horbar 2015 hstrok 127 hybull 2043 \
    hyphen 2010 iacute ed icirc ee iexcl a1 igr 3b9 igrave ec ijlig 133 imacr 12b image 2111 imath 131 infin 221e \
    inodot 131 int 222b iogon 12f iota 3b9 iquest bf isin 2208 iuml ef jmath 237 kappa 3ba kappav 3f0 kcedil 137 \
    kgr 3ba kgreen 138 khgr 3c7 lArr 21d0 lE 2266 lacute 13a lambda 3bb lang 27e8 langle 27e8 laquo ab larr 2190 \
    lbrack 5b lcaron 13e lcedil 13c lceil 2308 ldquo 201c ldquor 201e le 2264 leftarrow 2190 leq 2264 leqslant 2a7d \
    les 2a7d lfloor 230a lgr 3bb lne 2a87 lowast 2217 lowbar 5f loz 25ca lozf 29eb lpar 28 lrarr 21c6 lrm 200e \
    lsaquo 2039 lsim 2272 lsqb 5b lsquo 2018 lsquor 201a lstrok 142 lt 3c ltri 25c3 macr af male 2642 map 21a6 \
    mdash 2014 mgr 3bc micro b5 mid 2223 middot b7 minus 2212 minusd 2238 mldr 2026 mnplus 2213 mp 2213 mu 3bc \
    nabla 2207 nacute 144 nap 2249 natur 266e nbsp a0 ncaron 148 ncedil 146 ndash 2013 ne 2260 nearr 2197 \
    nequiv 2262 ngr 3bd ni 220b nldr 2025 nmid 2224 not ac notin 2209 nsim 2241 nsub 2284 ntilde f1 nu 3bd num 23 \
    numsp 2007 oacute f3 ocirc f4 odblac 151 oelig 153 ogon 2db ogr 3bf ograve f2 ohgr 3c9 ohm 3a9 oline 203e \
    omacr 14d omega 3c9 omicron 3bf oplus 2295 or 2228 ordf aa ordm ba oslash f8 otilde f5 otimes 2297 ouml f6 \
    par 2225 para b6 parallel 2225 part 2202 percnt 25 period 2e permil 2030 perp 22a5 pgr 3c0 phgr 3c6 phi 3c6 \
    phiv 3d5 phone 260e pi 3c0 piv 3d6 planck 210f plus 2b plusmn b1 pm b1 pound a3 prime 2032 prod 220f prop 221d \
    psgr 3c8 psi 3c8 puncsp 2008 quest 3f quot 22 rArr 21d2 racute 155 radic 221a rang 27e9 rangle 27e9 raquo bb \
    rarr 2192 rarrw 219d ratio 2236 rbrack 5d rcaron 159 rcedil 157 rceil 2309 rdquo 201d rdquor 201d real 211c \
    reg ae rfloor 230b rgr 3c1 rho 3c1 rhov 3f1 rightarrow 2192 ring 2da rlarr 21c4 rlm 200f rpar 29 rsaquo 203a \
    rsqb 5d rsquo 2019 rsquor 2019 rtri 25b9 sacute 15b sbquo 201a scaron 161 scedil 15f sdot 22c5 searr 2198 \
    sect a7 semi 3b setminus 2216 setmn 2216 sext 2736 sfgr 3c2 sgr 3c3 sharp 266f shy ad sigma 3c3 sigmaf 3c2 \
    sigmav 3c2 sim 223c sime 2243 smile 2323 sol 2f spades 2660 squ 25a1 square 25a1 squf 25aa star 2606 starf 2605 \
    straightphi 3d5 sub 2282 sube 2286 sum 2211 sung 266a sup 2283 sup1 b9 sup2 b2 sup3 b3 supe 2287 szlig df \
    tau 3c4 tcaron 165 tcedil 163 tgr 3c4 there4 2234 therefore 2234 theta 3b8 thetasym 3d1 thetav 3d1 thgr 3b8 \
    thinsp 2009 thkap 2248 thorn fe tilde 2dc times d7 tprime 2034 trade 2122 tstrok 167 uArr 21d1 uacute fa \
    uarr 2191 ucirc fb udblac 171 ugr 3c5 ugrave f9 umacr 16b uml a8 uogon 173 uparrow 2191 upsih 3d2 upsilon 3c5 \
    uring 16f utri 25b5 utrif 25b4 uuml fc varepsilon 3f5 varphi 3d5 vartheta 3d1 verbar 7c vert 7c vprop 221d \
    weierp 2118 xgr 3be xharr 27f7 xi 3be xrarr 27f6 yacute fd yen a5 yuml ff zacute 17a zcaron 17e zdot 17c \
    zeta 3b6 zgr 3b6 zwj 200d zwnj 200c";

#[cfg(test)]
mod tests {
    use super::*;

    fn text(s: &str) -> Resolved {
        Resolved::Text(s.to_owned())
    }

    #[test]
    fn numbers_and_names_stand_for_their_characters() {
        let mut e = Entities::new("");
        let known = [
            ("#60", "<"),
            ("#x0003c", "<"),
            ("#X3C", "<"),
            ("lt", "<"),
            ("amp", "&"),
            ("plusmn", "±"),
            ("le", "≤"),
            ("minus", "−"),
            ("middot", "·"),
            ("thinsp", "\u{2009}"),
            ("chi", "χ"),
            ("agr", "α"),
            ("KHgr", "Χ"),
            ("shy", ""),
            ("half", "½"),
            ("ccaron", "č"),
        ];
        for (name, stands) in known {
            assert_eq!(e.resolve(name), text(stands), "{name}");
        }
        for name in ["#0", "#xD800", "#99999999999", "nosuch", ""] {
            assert_eq!(e.resolve(name), Resolved::Unknown, "{name}");
        }
        assert!(names().len() > 250);
    }

    #[test]
    fn declarations_hold_within_reason() {
        let mut e = Entities::new("");
        e.declare(
            "article [<!ENTITY % x SYSTEM 'x.ent'> %x; <!ENTITY unit \"<i>mg</i>&#x2009;l\"> <!ENTITY both '&unit;&unit;'> \
             <!ENTITY far SYSTEM \"far.xml\"> <!ENTITY me '&me;'> <!ENTITY unit 'no'>]",
        );
        assert_eq!(e.resolve("unit"), text("mg\u{2009}l"));
        assert_eq!(e.resolve("both"), text("mg\u{2009}lmg\u{2009}l"));
        assert_eq!(e.resolve("far"), Resolved::Unknown);
        assert_eq!(e.resolve("me"), Resolved::TooLarge);
    }
}
