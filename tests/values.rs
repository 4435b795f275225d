//! The value grammar: what is read and as what, what is refused and where, and that whatever is printed reads back.

#![cfg(not(target_arch = "wasm32"))]

use chordwright::exact::{Rational, Surd, parse_fraction, ratio, whole};
use chordwright::measure::{
    MAX_CHARACTERS, MAX_DEPTH, MAX_DIGITS, Sheet, Unit, ValueError, parse_degrees, parse_length, parse_pitch,
    parse_plain, pretty,
};
use num_bigint::BigInt;
use proptest::prelude::*;

use Unit::{Cm, Ft, In, M, Mm};

fn fraction(text: &str) -> Rational {
    parse_fraction(text).unwrap_or_else(|| panic!("{text} is no fraction"))
}

/// Each text, on a sheet in the unit, is this many units.
fn check(table: &[(&str, Unit, &str)]) {
    for &(text, unit, expected) in table {
        assert_eq!(parse_length(text, unit), Ok(fraction(expected)), "`{text}` in {}", unit.symbol());
    }
}

/// Each text is refused at this character, with a message that holds these words.
fn refuse(read: impl Fn(&str) -> Result<Rational, ValueError>, table: &[(&str, usize, &str)]) {
    for &(text, character, words) in table {
        match read(text) {
            Ok(value) => panic!("`{text}` is read as {value}"),
            Err(error) => {
                assert_eq!(error.character, character, "`{text}`: {error}");
                assert!(error.message.contains(words), "`{text}`: {error}");
            }
        }
    }
}

fn refuse_lengths(table: &[(&str, usize, &str)]) {
    refuse(|text| parse_length(text, In), table);
}

#[test]
fn every_example_of_the_file_format() {
    check(&[
        ("10'-4 5/16\"", In, "1989/16"),
        ("10' 4 5/16\"", In, "1989/16"),
        ("10'-4-5/16\"", In, "1989/16"),
        ("4 5/16\"", In, "69/16"),
        ("10'", In, "120"),
        ("10.5'", In, "126"),
        ("3810", In, "3810"),
        ("3810", Mm, "3810"),
        ("3810 mm", Mm, "3810"),
        ("3810 mm", In, "150"),
        ("3.81 m", Mm, "3810"),
        ("3.81 m", In, "150"),
        ("5/16", In, "5/16"),
        ("40'/7", In, "480/7"),
        ("(40' - 2\")/7", In, "478/7"),
        ("3 * 2'-6\"", In, "90"),
        ("-4\"", In, "-4"),
        ("5'-8 9/16\"", In, "1097/16"),
        ("8'-3 3/8\"", In, "795/8"),
        ("6'", In, "72"),
        ("1/16", In, "1/16"),
        ("0", In, "0"),
    ]);
}

#[test]
fn feet_and_inches_in_every_way_the_trade_writes_them() {
    check(&[
        ("10'4\"", In, "124"),
        ("10' 4\"", In, "124"),
        ("10'-4\"", In, "124"),
        ("10'-4", In, "124"),
        ("10' 4", In, "124"),
        ("10'-0\"", In, "120"),
        ("10'-0 1/2\"", In, "241/2"),
        ("10'-1/2\"", In, "241/2"),
        ("10' 1/2\"", In, "241/2"),
        ("10'1/2\"", In, "241/2"),
        ("0'-6\"", In, "6"),
        ("0'-0 1/16\"", In, "1/16"),
        ("10'-4.5\"", In, "249/2"),
        ("10'-4-1/2\"", In, "249/2"),
        ("10'-4-1/2", In, "249/2"),
        ("10'-16\"", In, "136"),
        ("10'-4 20/16\"", In, "501/4"),
        ("1/2\"", In, "1/2"),
        ("1/2'", In, "6"),
        ("4-5/16\"", In, "69/16"),
        ("4 5/16", In, "69/16"),
        ("7 1/2'", In, "90"),
        (".5\"", In, "1/2"),
        ("0.0625\"", In, "1/16"),
        ("010'-04\"", In, "124"),
    ]);
}

#[test]
fn units_by_word_and_by_mark_on_every_sheet() {
    check(&[
        ("10ft 4in", In, "124"),
        ("10 ft 4 in", In, "124"),
        ("10 ft. 4 in.", In, "124"),
        ("10 feet 4 inches", In, "124"),
        ("1 foot 1 inch", In, "13"),
        ("10FT-4IN", In, "124"),
        ("10 ft - 4 in", In, "116"),
        ("10ft", Ft, "10"),
        ("4in", Ft, "1/3"),
        ("10'-4\"", Ft, "31/3"),
        ("10", Ft, "10"),
        ("1\"", Mm, "127/5"),
        ("1'", Mm, "1524/5"),
        ("1\"", Cm, "127/50"),
        ("1\"", M, "127/5000"),
        ("10'-4 5/16\"", Mm, "252603/80"),
        ("3.81m", In, "150"),
        ("25.4mm", In, "1"),
        ("2.54 cm", In, "1"),
        ("381cm", Mm, "3810"),
        ("1 m", Cm, "100"),
        ("1 cm", M, "1/100"),
        ("3 1/2 mm", Mm, "7/2"),
        ("1/3 m", Mm, "1000/3"),
    ]);
}

#[test]
fn typographic_marks_and_fraction_characters() {
    check(&[
        ("10′-4 5/16″", In, "1989/16"),
        ("10’ 4”", In, "124"),
        ("10‘4“", In, "124"),
        ("10ʹ4ʺ", In, "124"),
        ("10''", In, "10"),
        ("10'4''", In, "124"),
        ("10′4′′", In, "124"),
        ("−4″", In, "-4"),
        ("‑4\"", In, "-4"),
        ("10'–4\"", In, "124"),
        ("40′ − 2″", In, "478"),
        ("10′‐4″", In, "124"),
        ("10′‒4″", In, "124"),
        ("4½\"", In, "9/2"),
        ("4 ½\"", In, "9/2"),
        ("4-½\"", In, "9/2"),
        ("½", In, "1/2"),
        ("10'-½\"", In, "241/2"),
        ("10′-4⅜″", In, "995/8"),
        ("⅓", In, "1/3"),
        ("⅔", In, "2/3"),
        ("¼", In, "1/4"),
        ("¾", In, "3/4"),
        ("⅕", In, "1/5"),
        ("⅖", In, "2/5"),
        ("⅗", In, "3/5"),
        ("⅘", In, "4/5"),
        ("⅙", In, "1/6"),
        ("⅚", In, "5/6"),
        ("⅐", In, "1/7"),
        ("⅛", In, "1/8"),
        ("⅜", In, "3/8"),
        ("⅝", In, "5/8"),
        ("⅞", In, "7/8"),
        ("⅑", In, "1/9"),
        ("⅒", In, "1/10"),
        ("↉", In, "0"),
        ("4 ⁵⁄₁₆\"", In, "69/16"),
        ("⁵/₁₆", In, "5/16"),
        ("4 5⁄16″", In, "69/16"),
        ("5∕16", In, "5/16"),
        ("3 × 2′-6″", In, "90"),
        ("3 x 2'-6\"", In, "90"),
        ("40' ÷ 7", In, "480/7"),
        ("10'\u{a0}4\u{2009}5/16\"", In, "1989/16"),
        ("\t10' 4\" \u{202f}", In, "124"),
    ]);
}

#[test]
fn blanks_tell_a_hyphen_from_a_minus() {
    check(&[
        ("40'-2\"", In, "482"),
        ("40' - 2\"", In, "478"),
        ("40'-2\"/7", In, "482/7"),
        ("(40'-2\")/7", In, "482/7"),
        ("4 - 5/16\"", In, "59/16"),
        ("4\"-5/16\"", In, "59/16"),
        ("10'-4\"-2\"", In, "122"),
        ("10'-4\" - 2\"", In, "122"),
        ("10-4", In, "6"),
        ("10 -4", In, "6"),
        ("-10'-4\"", In, "-124"),
        ("- 10'-4\"", In, "-124"),
        ("-10' - 4\"", In, "-124"),
        ("-10' + 4\"", In, "-116"),
        ("12 - 1/2", In, "23/2"),
        ("--4", In, "4"),
        ("+4\"", In, "4"),
        ("10' - -4\"", In, "124"),
    ]);
    refuse_lengths(&[
        ("40' -2\"", 5, "a hyphen or a minus?"),
        ("40'- 2\"", 4, "a hyphen or a minus?"),
        ("4-5/16", 2, "a hyphen or a minus?"),
        ("4 -5/16\"", 3, "a hyphen or a minus?"),
        ("10'-4 -1/2\"", 7, "a hyphen or a minus?"),
        ("10'-4-5 mm", 6, "a hyphen or a minus?"),
        ("10'-4-5", 6, "a hyphen or a minus?"),
        ("10'-4 -5", 7, "a hyphen or a minus?"),
        ("10'-4mm", 6, "expected inches after feet"),
        ("10.5'-6\"", 7, "expected whole feet before inches"),
        ("1/2' 6\"", 6, "expected whole feet before inches"),
        // Joined or subtracted? Behind any foot mark nobody can tell.
        ("(10)'-6\"", 6, "a hyphen or a minus?"),
        ("(4 + 6) ft-6 in", 11, "a hyphen or a minus?"),
    ]);
    check(&[("(10)' - 6\"", In, "114"), ("(4 + 6) ft", In, "120")]);
}

#[test]
fn plain_arithmetic_goes_from_left_to_right_with_products_first() {
    check(&[
        ("1 + 2 * 3", In, "7"),
        ("(1 + 2) * 3", In, "9"),
        ("2 * 40'/7", In, "960/7"),
        ("40' / 7 / 2", In, "240/7"),
        ("40'/7/2", In, "240/7"),
        ("480/7/2", In, "240/7"),
        ("480/7/2/3", In, "80/7"),
        ("40'/7/2/3", In, "80/7"),
        ("40' / 1/2", In, "960"),
        ("40' / (1/2)", In, "960"),
        ("40'/½", In, "960"),
        ("3/4 * 40'", In, "360"),
        ("40' * 3/4", In, "360"),
        ("2*3/4", In, "3/2"),
        ("12 - 3 - 4", In, "5"),
        ("40' - 2 * 3\"", In, "474"),
        ("10' + 4", In, "124"),
        ("10' + 4", Ft, "14"),
        ("4 + 10'", In, "124"),
        ("6 / -2", In, "-3"),
        ("-(3 + 4)\"", In, "-7"),
        ("(3 + 4) mm", Mm, "7"),
        ("(1/2 + 1/4)\"", In, "3/4"),
        ("10' / 5' * 3'", In, "72"),
        ("(6' + 6')/(2 + 2)", In, "36"),
        ("1/3 + 1/3 + 1/3", In, "1"),
        ("0.1 + 0.2", In, "3/10"),
    ]);
}

#[test]
fn quantities_that_do_not_agree_are_refused_where_they_meet() {
    refuse_lengths(&[
        ("3' * 2'", 6, "expected a plain number, found a length"),
        ("3 / 2'-6\"", 5, "expected a plain number, found a length"),
        ("3' / 2'", 4, "a length over a length"),
        ("3'/2' + 1", 3, "a length over a length"),
        ("3'/2' + 1'", 7, "a length and a plain number do not add"),
        ("1' - 3'/2'", 4, "a length and a plain number do not add"),
        ("(3')\"", 5, "expected an operator or the end after a length"),
        ("(3'/2')'", 8, "expected an operator or the end after a ratio"),
    ]);
}

#[test]
fn no_division_by_zero_in_any_way() {
    refuse_lengths(&[
        ("1/0", 3, "division by zero"),
        ("4 1/0\"", 5, "division by zero"),
        ("1 / 0", 5, "division by zero"),
        ("1/(2 - 2)", 3, "division by zero"),
        ("40'/0", 5, "division by zero"),
        ("40'/7/0", 7, "division by zero"),
        ("¹⁄₀", 3, "division by zero"),
        ("10' / 0'", 7, "division by zero"),
        ("1/0.0", 3, "division by zero"),
        ("1/↉", 3, "division by zero"),
    ]);
}

#[test]
fn what_cannot_be_read_is_refused_at_its_character() {
    refuse_lengths(&[
        ("", 1, "expected a number, found the end"),
        ("   ", 4, "expected a number, found the end"),
        ("abc", 1, "expected a number, a mark"),
        ("10 yards", 4, "found `yards`"),
        ("10'-4x\"", 6, "to multiply, write *"),
        ("4 x \"", 5, "expected a number, found `\"`"),
        ("10 4", 4, "expected an operator or the end, found `4`"),
        ("10' 4\" 5", 8, "expected an operator or the end, found `5`"),
        ("3,5", 2, "found a comma"),
        ("1,000 mm", 2, "found a comma"),
        ("5.", 3, "expected a digit after the decimal point"),
        (".", 2, "expected a digit after the decimal point"),
        ("1.2.3", 4, "expected"),
        ("5/", 3, "expected a number, found the end"),
        ("/5", 1, "expected a number, found `/`"),
        ("5 +", 4, "expected a number, found the end"),
        ("* 5", 1, "expected a number, found `*`"),
        ("(5", 3, "expected `)`, found the end"),
        ("5)", 2, "expected an operator or the end, found `)`"),
        ("()", 2, "expected a number, found `)`"),
        ("(1)(2)", 4, "expected an operator or the end, found `(`"),
        ("'", 1, "expected a number"),
        ("\"4", 1, "expected a number"),
        ("10'\"", 4, "expected an operator or the end"),
        ("10\"4'", 4, "expected an operator or the end"),
        ("10 mm cm", 7, "expected an operator or the end"),
        ("1e3", 2, "found `e`"),
        ("0x10", 2, "put a blank on both sides of the x"),
        ("2x4", 2, "to multiply, write *"),
        ("2 x4", 3, "to multiply, write *"),
        ("x", 1, "to multiply, write *"),
        ("NaN", 1, "expected a number"),
        ("∞", 1, "found `∞`"),
        ("٣", 1, "found `٣`"),
        ("5°", 2, "expected an operator or the end"),
        ("²", 2, "expected a fraction slash"),
        ("⁵⁄", 3, "expected lowered digits"),
        ("⁵⁄16", 3, "expected lowered digits"),
        ("4\n5", 2, "found `\\n`"),
        ("4\u{0}", 2, "found"),
        ("<img src=x onerror=alert(1)>", 1, "found `<`"),
        ("10′ 4″ ∆", 8, "found `∆`"),
    ]);
}

#[test]
fn forty_digits_and_no_more() {
    let nines = |count: usize| "9".repeat(count);
    assert_eq!((MAX_DIGITS, MAX_DEPTH), (40, 32));
    assert_eq!(parse_length(&nines(40), In), Ok(fraction(&nines(40))));
    assert_eq!(
        parse_length(&format!("0.{}", nines(39)), In),
        Ok(fraction(&format!("{}/1{}", nines(39), "0".repeat(39))))
    );
    assert_eq!(parse_length(&format!("1/{}", nines(40)), In), Ok(fraction(&format!("1/{}", nines(40)))));
    refuse_lengths(&[
        (&nines(41), 1, "more than the limit of 40 digits"),
        (&format!("  {}", nines(41)), 3, "more than the limit of 40 digits"),
        (&format!("0.{}", nines(40)), 1, "more than the limit of 40 digits"),
        (&format!("1/{}", nines(41)), 3, "more than the limit of 40 digits"),
        (&format!("⁹⁄{}", "₉".repeat(41)), 1, "more than the limit of 40 digits"),
        // Each number is short, the value is not.
        (&format!("{0} * {0}", nines(40)), 1, "comes to more than the limit of 40 digits"),
        (&format!("1/{} / 11", nines(40)), 1, "comes to more than the limit of 40 digits"),
        (&format!("{}'", nines(40)), 1, "comes to more than the limit of 40 digits"),
    ]);
    assert_eq!(
        parse_length(&format!("{0} * {0} / {0}", nines(40)), In),
        Ok(fraction(&nines(40))),
        "only the result counts"
    );
}

#[test]
fn thirty_two_deep_and_no_deeper() {
    let nested = |depth: usize| format!("{}5{}", "(".repeat(depth), ")".repeat(depth));
    assert_eq!(parse_length(&nested(32), In), Ok(whole(5)));
    assert_eq!(parse_length(&format!("{}5", "-".repeat(32)), In), Ok(whole(5)));
    assert_eq!(
        parse_length(&format!("{}5", "-(".repeat(16)).replace("5", &format!("5{}", ")".repeat(16))), In),
        Ok(whole(5))
    );
    refuse_lengths(&[
        (&nested(33), 34, "nested deeper than the limit of 32"),
        (&format!("{}5", "-".repeat(33)), 34, "nested deeper than the limit of 32"),
        (&"(".repeat(200), 34, "nested deeper than the limit of 32"),
    ]);
    let wide = format!("1{}", " + (1)".repeat(33));
    assert_eq!(parse_length(&wide, In), Ok(whole(34)), "side by side is not deep");
}

#[test]
fn texts_longer_than_the_limit_are_refused_whatever_they_hold() {
    let blanks = |count: usize| format!("{}5", " ".repeat(count - 1));
    assert_eq!(parse_length(&blanks(MAX_CHARACTERS), In), Ok(whole(5)));
    refuse_lengths(&[
        (&blanks(MAX_CHARACTERS + 1), MAX_CHARACTERS + 1, "longer than the limit of 200 characters"),
        (&"½".repeat(1_000_000), MAX_CHARACTERS + 1, "longer than the limit of 200 characters"),
    ]);
}

#[test]
fn plain_numbers_take_no_unit() {
    for (text, expected) in
        [("1/5", "1/5"), ("0.2", "1/5"), ("½", "1/2"), ("1 - 1/3", "2/3"), ("-3", "-3"), ("2 1/2", "5/2")]
    {
        assert_eq!(parse_plain(text), Ok(fraction(expected)), "{text}");
    }
    refuse(
        parse_plain,
        &[
            ("1 mm", 3, "expected a plain number without a unit"),
            ("1'", 2, "expected a plain number without a unit"),
            ("(1)\"", 4, "expected a plain number without a unit"),
            ("1°", 2, "expected an operator or the end"),
            ("1:2", 2, "found `:`"),
        ],
    );
}

#[test]
fn degrees_with_the_mark_or_without() {
    for (text, expected) in
        [("26.6", "133/5"), ("26.6°", "133/5"), ("90 °", "90"), ("45 deg", "45"), ("180/7", "180/7"), ("-30°", "-30")]
    {
        assert_eq!(parse_degrees(text), Ok(fraction(expected)), "{text}");
    }
    refuse(
        parse_degrees,
        &[
            ("26°34'", 4, "expected an operator or the end"),
            ("26'", 3, "expected a plain number without a unit"),
            ("°", 1, "expected a number"),
            ("26° + 1°", 5, "expected an operator or the end"),
        ],
    );
}

#[test]
fn pitches_in_both_ways_they_are_said() {
    let read = |text: &str| parse_pitch(text).map(|(rise, run)| (rise.text, rise.value, run.text, run.value));
    for (text, rise, run) in [
        ("6:12", "6", "12"),
        ("6 in 12", "6", "12"),
        ("6 : 12", "6", "12"),
        ("7 3/16 in 12", "115/16", "12"),
        ("6 1/2:12", "13/2", "12"),
        ("750 in 1000", "750", "1000"),
        ("0:12", "0", "12"),
        ("½:12", "1/2", "12"),
    ] {
        let (_, rise_read, _, run_read) = read(text).unwrap_or_else(|error| panic!("{text}: {error}"));
        assert_eq!((rise_read, run_read), (fraction(rise), fraction(run)), "{text}");
    }
    let value = |text: &str| parse_pitch(text).map(|(rise, run)| rise.value / run.value);
    refuse(
        value,
        &[
            ("6", 2, "expected rise and run such as 6:12"),
            ("6/12", 5, "expected rise and run such as 6:12"),
            ("", 1, "expected a number"),
            (":12", 1, "expected a number"),
            ("6:", 3, "expected a number"),
            ("6:q2", 3, "expected"),
            ("6 in 12q", 8, "found `q`"),
            ("6   in   12q", 12, "found `q`"),
            ("   q in 12", 4, "found `q`"),
            ("6:12:18", 5, "found `:`"),
            ("6\":12", 2, "expected a plain number without a unit"),
        ],
    );
}

/// Any rational with up to this many digits above and below.
fn rationals(digits: usize) -> impl Strategy<Value = Rational> {
    let number = |least: usize| proptest::collection::vec(0..10u8, least..=digits);
    (any::<bool>(), number(1), number(1)).prop_map(|(negative, above, below)| {
        let integer = |digits: &[u8]| BigInt::from_radix_be(num_bigint::Sign::Plus, digits, 10).unwrap_or_default();
        let value = Rational::new(integer(&above), integer(&below) + 1u32);
        if negative { -value } else { value }
    })
}

fn units() -> impl Strategy<Value = Unit> {
    proptest::sample::select(Unit::ALL.to_vec())
}

fn steps() -> impl Strategy<Value = Rational> {
    let usual = [
        ratio(0, 1),
        ratio(1, 16),
        ratio(1, 64),
        ratio(1, 3),
        ratio(1, 10),
        ratio(1, 1000),
        whole(1),
        whole(5),
        ratio(1, 192),
    ];
    prop_oneof![
        proptest::sample::select(usual.to_vec()),
        rationals(4).prop_map(|step| if step < whole(0) { -step } else { step })
    ]
}

/// Texts made of the pieces of the grammar, so that many of them are read.
fn likely_texts() -> impl Strategy<Value = String> {
    let pieces = [
        "1",
        "10",
        "0",
        "5/16",
        "½",
        "'",
        "\"",
        "′",
        "″",
        " ",
        "-",
        " - ",
        "−",
        "+",
        "*",
        "/",
        "(",
        ")",
        "ft",
        "in",
        " mm",
        "m",
        ".5",
        ".",
        "°",
        "x",
        "⁵⁄₁₆",
        ",",
        ":",
        "é",
    ];
    proptest::collection::vec(proptest::sample::select(pieces.to_vec()), 0..14).prop_map(|pieces| pieces.concat())
}

proptest! {
    #![proptest_config(ProptestConfig { failure_persistence: None, cases: 600, ..ProptestConfig::default() })]

    #[test]
    fn a_length_printed_to_a_step_reads_back_to_the_nearest_multiple(value in rationals(9), unit in units(), step in steps()) {
        let sheet = Sheet::of(unit, &step);
        let text = sheet.length(&value);
        let read = parse_length(&text, unit);
        let read = read.unwrap_or_else(|error| panic!("{text}: {error}"));
        prop_assert!((&read / sheet.step()).is_integer(), "{} is no multiple of the step", text);
        let misfit = if read > value { &read - &value } else { &value - &read };
        prop_assert!(misfit * whole(2) <= *sheet.step(), "{} for {}", text, value);
        prop_assert_eq!(sheet.length(&read), text);
    }

    #[test]
    fn a_length_printed_exactly_reads_back_to_itself(value in rationals(18), unit in units()) {
        let sheet = Sheet::of(unit, &whole(0));
        for text in [sheet.exact_words(&value), sheet.plain(&value), value.to_string(), pretty(&sheet.exact_words(&value))] {
            prop_assert_eq!(parse_length(&text, unit), Ok(value.clone()), "{}", text);
        }
    }

    #[test]
    fn a_length_as_it_would_be_typed_reads_back_however_long(value in rationals(40), unit in units()) {
        let written = Sheet::of(unit, &whole(0)).written(&value);
        prop_assert_eq!(&written.value, &value);
        prop_assert_eq!(parse_length(&written.text, unit), Ok(value), "{}", written.text);
    }

    #[test]
    fn a_root_prints_the_nearest_multiple(quadrance in rationals(12), step in steps()) {
        let quadrance = if quadrance < whole(0) { -quadrance } else { quadrance };
        let sheet = Sheet::of(Unit::In, &step);
        let printed = sheet.surd(&Surd::of_quadrance(&quadrance).expect("not negative"));
        let read = parse_length(&printed.text, Unit::In).unwrap_or_else(|error| panic!("{}: {error}", printed.text));
        // |read - √q| <= step/2, without a root: (2·read - step)² <= 4q <= (2·read + step)².
        let (low, high) = (&read * whole(2) - sheet.step(), &read * whole(2) + sheet.step());
        prop_assert!(low <= whole(0) || &low * &low <= &quadrance * whole(4), "{}", printed.text);
        prop_assert!(&high * &high >= &quadrance * whole(4), "{}", printed.text);
        prop_assert_eq!(printed.exact, &read * &read == quadrance);
    }

    #[test]
    fn a_bevel_and_degrees_read_back(run in rationals(6), rise in rationals(6), unit in units()) {
        let sheet = Sheet::of(unit, &whole(0));
        let bevel = sheet.bevel(&run, &rise);
        if !bevel.is_empty() {
            let (small, large) = parse_pitch(bevel.trim_end_matches(" steep")).unwrap_or_else(|error| panic!("{bevel}: {error}"));
            prop_assert!(small.value <= large.value && small.value >= whole(0), "{}", bevel);
            let degrees = parse_degrees(&sheet.slope_degrees(&run, &rise)).expect("degrees");
            prop_assert!(degrees >= whole(0) && degrees <= whole(90));
        }
    }

    #[test]
    fn no_text_panics_and_every_error_is_at_a_character_of_it(text in prop_oneof![any::<String>(), likely_texts()], unit in units()) {
        let end = text.chars().count() + 1;
        let errors = [
            parse_length(&text, unit).err(),
            parse_plain(&text).err(),
            parse_degrees(&text).err(),
            parse_pitch(&text).err(),
        ];
        for error in errors.into_iter().flatten() {
            prop_assert!((1..=end).contains(&error.character), "`{}`: {}", text, error);
            prop_assert!(!error.message.is_empty());
        }
    }

    #[test]
    fn a_value_that_is_read_is_the_same_in_every_unit(text in likely_texts()) {
        // Only texts in which every number has its unit: on another sheet they are the same length.
        if let Ok(inches) = parse_length(&text, Unit::In) {
            let feet = parse_length(&text, Unit::Ft).expect("what is read on one sheet is read on another");
            let bare = text.chars().all(|c| !matches!(c, '\'' | '"' | '′' | '″' | 'm' | 't' | 'n'));
            if bare {
                prop_assert_eq!(inches, feet);
            }
        }
    }
}
