//! Elements by plain calls.
//!
//! `html!` lays each element out in place, which came to some 400 bytes of WebAssembly apiece and half of the page's
//! own code; a call costs a few dozen. The program is loaded over one bar of signal, so the panels are built of these.

use std::rc::Rc;

use indexmap::IndexMap;
use yew::html::{onclick, oninput};
use yew::virtual_dom::{AttrValue, AttributeOrProperty, Attributes, VList, VNode, VTag, VText};
use yew::{Callback, Html, InputEvent, MouseEvent, NodeRef};

/// An element that is being put together.
#[derive(Debug)]
#[must_use]
pub struct El(Box<Parts>);

/// The attributes are kept apart until the element is finished: a tag that is given one at a time carries 2 KB that
/// turn each way of keeping attributes into this one.
#[derive(Debug)]
struct Parts {
    tag: VTag,
    attributes: IndexMap<AttrValue, AttributeOrProperty>,
}

/// A new element.
#[inline(never)]
pub fn el(tag: &'static str) -> El {
    El(Box::new(Parts { tag: VTag::new(tag), attributes: IndexMap::new() }))
}

/// A button; it has a name for tests.
#[inline(never)]
pub fn button(class: &'static str, testid: impl Into<AttrValue>, click: Callback<MouseEvent>) -> El {
    el("button").set("type", "button").class(class).put("data-testid", testid).click(click)
}

/// A drawing, which says nothing to those who cannot see it.
#[inline(never)]
pub fn drawing(view_box: &'static str) -> El {
    el("svg").set("viewBox", view_box).set("aria-hidden", "true").set("focusable", "false")
}

/// A place for an element that comes and goes while its neighbours are typed into. Children are matched by their
/// number: without the place, the field beside it would be drawn anew, and the keyboard would leave it.
#[inline(never)]
pub fn place(child: Option<El>) -> El {
    el("div").class("place").maybe(child)
}

/// The text of a truth in attributes.
pub const fn truth(value: bool) -> &'static str {
    if value { "true" } else { "false" }
}

/// Several nodes without an element around them.
#[inline(never)]
pub fn several(all: impl IntoIterator<Item = Html>) -> Html {
    let mut list = VList::new();
    list.add_children(all);
    VNode::from(list)
}

impl El {
    /// An attribute with a fixed value.
    #[inline(never)]
    pub fn set(self, name: &'static str, value: &'static str) -> Self {
        self.put_value(name, AttrValue::Static(value))
    }

    /// An attribute.
    pub fn put(self, name: &'static str, value: impl Into<AttrValue>) -> Self {
        self.put_value(name, value.into())
    }

    #[inline(never)]
    fn put_value(mut self, name: &'static str, value: AttrValue) -> Self {
        self.0.attributes.insert(AttrValue::Static(name), AttributeOrProperty::Attribute(value));
        self
    }

    /// Its class.
    #[inline(never)]
    pub fn class(self, name: &'static str) -> Self {
        self.set("class", name)
    }

    /// Its name for tests.
    #[inline(never)]
    pub fn test(self, name: &'static str) -> Self {
        self.set("data-testid", name)
    }

    /// A text in it.
    pub fn text(self, text: impl Into<AttrValue>) -> Self {
        self.add_text(text.into())
    }

    #[inline(never)]
    fn add_text(mut self, text: AttrValue) -> Self {
        self.0.tag.add_child(VNode::from(VText::new(text)));
        self
    }

    /// An element in it.
    #[inline(never)]
    pub fn with(mut self, child: Self) -> Self {
        self.0.tag.add_child(child.html());
        self
    }

    /// A node in it.
    #[inline(never)]
    pub fn node(mut self, child: Html) -> Self {
        self.0.tag.add_child(child);
        self
    }

    /// An element in it, if there is one.
    #[inline(never)]
    pub fn maybe(mut self, child: Option<Self>) -> Self {
        // An empty place keeps its neighbours where they are, so that none of them is drawn anew.
        self.0.tag.add_child(child.map_or_else(Html::default, Self::html));
        self
    }

    /// Elements in it.
    pub fn each(mut self, all: impl IntoIterator<Item = Self>) -> Self {
        for child in all {
            self = self.with(child);
        }
        self
    }

    /// What a click does.
    #[inline(never)]
    pub fn click(mut self, f: Callback<MouseEvent>) -> Self {
        self.0.tag.add_listener(Rc::new(onclick::Wrapper::new(f)));
        self
    }

    /// What typing does.
    #[inline(never)]
    pub fn typed(mut self, f: Callback<InputEvent>) -> Self {
        self.0.tag.add_listener(Rc::new(oninput::Wrapper::new(f)));
        self
    }

    /// What stands in an input.
    #[inline(never)]
    pub fn value(mut self, text: String) -> Self {
        self.0.tag.set_value(text);
        self
    }

    /// Its name among its neighbours, for lists whose rows come and go: each row stays itself, and what is typed in it
    /// keeps the keyboard. All of the list must have one.
    #[inline(never)]
    pub fn key(mut self, key: String) -> Self {
        self.0.tag.key = Some(key.into());
        self
    }

    /// Where the element is to be found once it is on the page.
    #[inline(never)]
    pub fn at(mut self, node: NodeRef) -> Self {
        self.0.tag.node_ref = node;
        self
    }

    /// The finished element.
    #[inline(never)]
    pub fn html(self) -> Html {
        let Parts { mut tag, attributes } = *self.0;
        tag.set_attributes(Attributes::IndexMap(Rc::new(attributes)));
        VNode::from(tag)
    }
}
