//! Names of nobody: invented clubs, and people built from syllables.

use crate::base::Stream;
use std::collections::BTreeSet;

/// Short label and full name of each club of the invented league: towns that are on no map, birds, stones and weather.
pub const CLUBS: [(&str, &str); 32] = [
    ("BRK", "Brackmoor Terns"),
    ("OSV", "Ostervale Gneiss"),
    ("QLH", "Quillhaven Curlews"),
    ("TMK", "Tamskerry Agates"),
    ("VRW", "Verrowick Plovers"),
    ("LMK", "Luminsk Feldspars"),
    ("PLV", "Pellhaven Drizzle"),
    ("DMS", "Drumsea Lapwings"),
    ("KVT", "Karvath Obsidians"),
    ("ASL", "Ashlomere Whimbrels"),
    ("NTM", "Nettlemoor Sleet"),
    ("SVR", "Solvarra Siskins"),
    ("GRW", "Grenwick Basalts"),
    ("WXM", "Wexmoor Hoarfrost"),
    ("YRG", "Yarrowgate Dunlins"),
    ("ISM", "Istmere Schists"),
    ("CPL", "Copperlune Rails"),
    ("FNK", "Fennickton Mizzle"),
    ("HDM", "Hadmoor Dippers"),
    ("JRV", "Jornvik Slates"),
    ("EMB", "Embersey Graupel"),
    ("ZLT", "Zeltova Pipits"),
    ("RVK", "Rovensk Flints"),
    ("UPL", "Uplarch Thaw"),
    ("CDR", "Caldrune Wheatears"),
    ("MVL", "Marvellock Tuffs"),
    ("THW", "Thornwharf Knots"),
    ("BSG", "Belsagund Squall"),
    ("XND", "Xandrift Garnets"),
    ("OLY", "Orlaney Redstarts"),
    ("DVM", "Davrimoor Cherts"),
    ("KSP", "Kesparra Haar"),
];

const GIVEN_HEAD: [&str; 20] =
    ["Tor", "Bel", "Mar", "Ke", "Zan", "Ori", "Du", "Fen", "Jas", "Lo", "Ra", "Vi", "Sa", "Wen", "Hal", "Emi", "Qua", "Ty", "Bro", "Ni"];
const GIVEN_TAIL: [&str; 16] =
    ["ven", "drick", "lo", "shan", "mir", "tavo", "rell", "quin", "den", "zha", "vis", "ko", "lan", "rique", "thar", "bo"];
const FAMILY_HEAD: [&str; 24] = [
    "Ank", "Bran", "Cald", "Dre", "Est", "Fal", "Gor", "Hul", "Iva", "Kes", "Lum", "Mor", "Nar", "Ost", "Pell", "Quar", "Ros", "Stav",
    "Tam", "Ulm", "Vor", "Wex", "Yar", "Zel",
];
const FAMILY_TAIL: [&str; 16] =
    ["deric", "ovan", "essi", "mark", "ingol", "ule", "aro", "wick", "amon", "strand", "ique", "ola", "berth", "anu", "gard", "ezza"];

/// Draws a name that `used` does not hold yet and notes it there. Some carry apostrophes, hyphens, dots and accents,
/// because real files do.
pub fn person(stream: &mut Stream, used: &mut BTreeSet<String>) -> String {
    loop {
        let name = format!("{} {}", given(stream), family(stream));
        if used.insert(name.clone()) {
            return name;
        }
    }
}

fn given(stream: &mut Stream) -> String {
    if stream.chance(0.06) {
        let initials = ["T.J.", "D.K.", "J.Q.", "A.Z.", "R.V."];
        return initials[stream.below(initials.len())].to_owned();
    }
    joined(stream, &GIVEN_HEAD, &GIVEN_TAIL)
}

fn family(stream: &mut Stream) -> String {
    let plain = joined(stream, &FAMILY_HEAD, &FAMILY_TAIL);
    match stream.below(12) {
        0 => format!("O'{plain}"),
        1 => format!("d'{plain}"),
        2 => format!("{plain}-{}", joined(stream, &FAMILY_HEAD, &FAMILY_TAIL)),
        3 => plain.replace('e', "é").replace('o', "ö"),
        4 => plain.replace('a', "á").replace('u', "ü").replace("n", "ñ"),
        5 => format!("{plain} Jr."),
        _ => plain,
    }
}

fn joined(stream: &mut Stream, heads: &[&str], tails: &[&str]) -> String {
    format!("{}{}", heads[stream.below(heads.len())], tails[stream.below(tails.len())])
}
