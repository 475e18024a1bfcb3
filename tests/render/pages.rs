//! HTML pages: what is in them, what is not, and that every element is closed.

use crate::samples;
use crate::scrambled::scrambled;
use mainspring::algebra::formula::{Formula, Symbol};
use mainspring::render::document::{Block, Document, Equation, Inline};
use mainspring::render::html::page;

fn body(document: &Document) -> String {
    let page = page(document);
    let start = page.find("<main>").expect("the page has a body");
    page[start..].to_string()
}

/// Panics unless every element is closed in order; elements that close themselves end in `/>`.
fn assert_closed(markup: &str) {
    let mut open: Vec<&str> = Vec::new();
    for tag in markup.split('<').skip(1).map(|rest| rest.split('>').next().unwrap_or_default()) {
        match tag.strip_prefix('/') {
            Some(name) => assert_eq!(open.pop(), Some(name)),
            None if tag.ends_with('/') => {}
            None => open.push(tag.split_whitespace().next().unwrap_or_default()),
        }
    }
    assert!(open.iter().all(|name| ["main"].contains(name)) || open.is_empty(), "{open:?}");
}

#[test]
fn every_element_is_closed() {
    for document in [samples::verdicts(), samples::nested(), samples::almost_ideal(4), scrambled(1), scrambled(2)] {
        let markup = body(&document);
        assert_closed(markup.trim_end_matches("</body>\n</html>\n"));
    }
}

#[test]
fn verdicts_as_a_page() {
    insta::assert_snapshot!(body(&samples::verdicts()));
}

#[test]
fn nested_as_a_page() {
    insta::assert_snapshot!(body(&samples::nested()));
}

#[test]
fn nothing_that_an_author_writes_becomes_markup() {
    let hostile = "<script>alert('x')</script> & \"q\"";
    let name = Formula::Symbol(Symbol { plain: hostile.into(), latex: Some(r"\hat{x}_{0}".into()) });
    let text = vec![Inline::text(hostile), Inline::Code(hostile.into()), Inline::math(name)];
    let display = Block::Display(vec![Equation::only(Formula::symbol(hostile))]);
    let document = Document { title: Some(hostile.into()), blocks: vec![Block::Paragraph(text), display] };
    let page = page(&document);
    assert!(!page.contains("<script"));
    assert!(page.contains("<title>&lt;script&gt;alert(&#39;x&#39;)&lt;/script&gt; &amp; &quot;q&quot;</title>"));
    assert!(page.contains("<msub><mover accent=\"true\"><mrow><mi>x</mi></mrow><mo stretchy=\"false\">^</mo></mover>"));
    assert!(!page.contains("http"), "nothing is fetched from elsewhere");
}
