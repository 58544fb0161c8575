//! The text of an expression that was read is read back as the same expression.
#![no_main]

use libfuzzer_sys::fuzz_target;

fuzz_target!(|text: &str| {
    if let Ok(expr) = linform_spec::parse_expression(text) {
        let written = linform_spec::text_of(&expr);
        let again = linform_spec::parse_expression(&written).unwrap();
        assert_eq!(linform_spec::text_of(&again), written);
    }
});
