//! Walking a request with the path of every field at hand, so that a refusal can name it.

use lampladder_core::error::InputError;
use serde::Serialize;
use serde_json::{Map, Value};

/// What is wrong, and with which field; no field where the line as a whole is.
#[derive(Debug, Serialize)]
pub(crate) struct Refusal {
    field: Option<String>,
    message: String,
}

impl Refusal {
    pub(crate) fn whole_line(message: impl Into<String>) -> Self {
        Self { field: None, message: message.into() }
    }

    pub(crate) fn at(path: impl Into<String>, message: impl Into<String>) -> Self {
        Self { field: Some(path.into()), message: message.into() }
    }

    /// What the core refused of the object at `path`.
    pub(crate) fn inside(path: &str, error: &InputError) -> Self {
        Self::at(join(path, error.field().name()), error.to_string())
    }
}

/// A value and where it stands.
#[derive(Debug, Clone)]
pub(crate) struct Node<'a> {
    value: &'a Value,
    path: String,
}

impl<'a> Node<'a> {
    pub(crate) fn path(&self) -> &str {
        &self.path
    }

    pub(crate) fn refuse(&self, message: impl Into<String>) -> Refusal {
        Refusal::at(self.path.clone(), message)
    }

    pub(crate) fn number(&self) -> Result<f64, Refusal> {
        self.value.as_f64().ok_or_else(|| self.expected("a number"))
    }

    pub(crate) fn text(&self) -> Result<&'a str, Refusal> {
        self.value.as_str().ok_or_else(|| self.expected("a text"))
    }

    pub(crate) fn truth(&self) -> Result<bool, Refusal> {
        self.value.as_bool().ok_or_else(|| self.expected("true or false"))
    }

    pub(crate) fn list(&self) -> Result<Vec<Self>, Refusal> {
        let values = self.value.as_array().ok_or_else(|| self.expected("a list"))?;
        let node = |(index, value)| Node { value, path: format!("{}[{index}]", self.path) };
        Ok(values.iter().enumerate().map(node).collect())
    }

    pub(crate) fn fields(&self) -> Result<Fields<'a>, Refusal> {
        let map = self.value.as_object().ok_or_else(|| self.expected("an object"))?;
        Ok(Fields::new(map, self.path.clone()))
    }

    fn expected(&self, wanted: &str) -> Refusal {
        let found = match self.value {
            Value::Null => "null",
            Value::Bool(_) => "true or false",
            Value::Number(_) => "a number",
            Value::String(_) => "a text",
            Value::Array(_) => "a list",
            Value::Object(_) => "an object",
        };
        self.refuse(format!("must be {wanted}, not {found}"))
    }
}

/// The fields of one object, each asked for by name; [`Self::done`] refuses the ones that nobody asked for.
#[derive(Debug)]
pub(crate) struct Fields<'a> {
    map: &'a Map<String, Value>,
    path: String,
    known: Vec<&'static str>,
}

impl<'a> Fields<'a> {
    pub(crate) const fn new(map: &'a Map<String, Value>, path: String) -> Self {
        Self { map, path, known: Vec::new() }
    }

    pub(crate) fn path(&self) -> &str {
        &self.path
    }

    /// A field that may be missing; null counts as missing.
    pub(crate) fn maybe(&mut self, name: &'static str) -> Option<Node<'a>> {
        self.known.push(name);
        let value = self.map.get(name).filter(|value| !value.is_null())?;
        Some(Node { value, path: join(&self.path, name) })
    }

    pub(crate) fn need(&mut self, name: &'static str) -> Result<Node<'a>, Refusal> {
        self.maybe(name).ok_or_else(|| Refusal::at(join(&self.path, name), "is missing"))
    }

    pub(crate) fn number(&mut self, name: &'static str) -> Result<f64, Refusal> {
        self.need(name)?.number()
    }

    pub(crate) fn maybe_number(&mut self, name: &'static str) -> Result<Option<f64>, Refusal> {
        self.maybe(name).map(|node| node.number()).transpose()
    }

    /// The numbers of a list that may be missing, each with its place.
    pub(crate) fn numbers(&mut self, name: &'static str) -> Result<Vec<(Node<'a>, f64)>, Refusal> {
        let Some(list) = self.maybe(name) else { return Ok(Vec::new()) };
        list.list()?.into_iter().map(|node| node.number().map(|value| (node, value))).collect()
    }

    pub(crate) fn done(self) -> Result<(), Refusal> {
        match self.map.keys().find(|key| !self.known.contains(&key.as_str())) {
            None => Ok(()),
            Some(key) => {
                let message = format!("unknown field; known here are {}", self.known.join(", "));
                Err(Refusal::at(join(&self.path, key), message))
            }
        }
    }
}

fn join(path: &str, name: &str) -> String {
    if path.is_empty() { name.to_owned() } else { format!("{path}.{name}") }
}
