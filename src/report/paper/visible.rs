/// Text with every sign made visible that a reader could not see, or that would make the text around it read otherwise: control
/// characters, signs that turn the direction of writing, that have no width, or that are none, each as its number, such as `⟨U+202E⟩`.
/// Both ways of writing a report put all text through this first.
pub(super) fn visible(text: &str) -> String {
    let mut shown = String::with_capacity(text.len());
    for sign in text.chars() {
        if is_hidden(sign) {
            shown.push_str(&format!("⟨U+{:04X}⟩", u32::from(sign)));
        } else {
            shown.push(sign);
        }
    }
    shown
}

/// Whether a sign can't be seen and is no part of how words of any language are written.
fn is_hidden(sign: char) -> bool {
    let of_directions = matches!(sign, '\u{61c}' | '\u{200e}' | '\u{200f}' | '\u{202a}'..='\u{202e}' | '\u{2066}'..='\u{2069}');
    let without_width = matches!(sign, '\u{ad}' | '\u{200b}' | '\u{2060}'..='\u{2065}' | '\u{206a}'..='\u{206f}' | '\u{feff}');
    let of_layout = sign.is_control() || matches!(sign, '\u{2028}' | '\u{2029}' | '\u{fff9}'..='\u{fffb}');
    let tag = matches!(sign, '\u{e0000}'..='\u{e007f}');
    let none = matches!(u32::from(sign) & 0xffff, 0xfffe | 0xffff) || matches!(sign, '\u{fdd0}'..='\u{fdef}');
    of_directions || without_width || of_layout || tag || none
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_can_not_be_seen_is_shown() {
        assert_eq!(visible("a\nb\u{7}\u{7f}"), "a⟨U+000A⟩b⟨U+0007⟩⟨U+007F⟩");
        assert_eq!(visible("gate\u{202e}txt.exe"), "gate⟨U+202E⟩txt.exe");
        assert_eq!(visible("\u{feff}x\u{200b}\u{85}\u{ffff}"), "⟨U+FEFF⟩x⟨U+200B⟩⟨U+0085⟩⟨U+FFFF⟩");
    }

    #[test]
    fn words_of_all_languages_stay() {
        for text in ["棚の上", "מדף", "می\u{200c}خواهم", "Gehäuse ½ 30°/s²", "👩\u{200d}🔧"] {
            assert_eq!(visible(text), text);
        }
    }
}
