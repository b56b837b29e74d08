//! The accessibility tree of the window as data: what a screen reader would find.

use egui::accesskit::{Action, Affine, Node, NodeId, Rect, Role, Toggled, TreeUpdate};
use serde::Serialize;
use std::collections::BTreeMap;

/// One view as `rampcrest-describe/1`.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Description {
    /// `rampcrest-describe/1`.
    pub schema: &'static str,
    /// Code of the view.
    pub view: String,
    /// Width and height, points.
    pub size: [usize; 2],
    /// Nodes, parents before children, in reading order.
    pub nodes: Vec<Described>,
}

/// One node of the accessibility tree.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Described {
    /// `ID@AT` of a shown number.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub key: Option<String>,
    /// Role in kebab case.
    pub role: String,
    /// Accessible name, labels resolved.
    pub name: String,
    /// Value, if the node has one.
    pub value: Option<String>,
    /// Left, top, width, height in points.
    pub rect: [f64; 4],
    /// Whether the keyboard can reach it.
    pub focusable: bool,
}

/// Walks the tree from its root.
#[must_use]
pub fn describe(update: &TreeUpdate, view: &str, size: [usize; 2]) -> Description {
    let tree = Tree { nodes: update.nodes.iter().map(|(id, node)| (*id, node)).collect() };
    let mut nodes = Vec::new();
    if let Some(info) = &update.tree {
        tree.walk(info.root, Affine::IDENTITY, &mut nodes);
    }
    Description { schema: "rampcrest-describe/1", view: view.to_owned(), size, nodes }
}

struct Tree<'a> {
    nodes: BTreeMap<NodeId, &'a Node>,
}

impl Tree<'_> {
    fn walk(&self, root: NodeId, onto: Affine, out: &mut Vec<Described>) {
        // A list instead of recursion: the depth of the tree is not ours to trust.
        let mut open = vec![(root, onto)];
        while let Some((id, onto)) = open.pop() {
            let Some(node) = self.nodes.get(&id) else {
                continue;
            };
            // The root's transform turns points into pixels; places are told in points.
            let onto = match node.transform() {
                Some(transform) if id != root => onto * *transform,
                _ => onto,
            };
            if let Some(described) = self.describe(node, onto) {
                out.push(described);
            }
            open.extend(node.children().iter().rev().map(|child| (*child, onto)));
        }
    }

    /// `None` for containers that say nothing.
    fn describe(&self, node: &Node, onto: Affine) -> Option<Described> {
        let key = node.author_id().map(str::to_owned);
        let name = self.name(node);
        let value = value(node);
        if key.is_none() && name.is_empty() && value.is_none() {
            return None;
        }
        let rect = onto.transform_rect_bbox(node.bounds().unwrap_or(Rect::ZERO));
        let tenth = |x: f64| (x * 10.0).round() / 10.0;
        Some(Described {
            key,
            role: kebab(node.role()),
            name,
            value,
            rect: [rect.x0, rect.y0, rect.width(), rect.height()].map(tenth),
            focusable: node.supports_action(Action::Focus),
        })
    }

    fn name(&self, node: &Node) -> String {
        if let Some(label) = node.label() {
            return label.to_owned();
        }
        let labels: Vec<&str> = node
            .labelled_by()
            .iter()
            .filter_map(|id| self.nodes.get(id))
            .filter_map(|label| label.label().or_else(|| label.value()))
            .collect();
        if labels.is_empty() && node.role() == Role::Label {
            return node.value().unwrap_or_default().to_owned();
        }
        labels.join(" ")
    }
}

fn value(node: &Node) -> Option<String> {
    if let Some(text) = node.value() {
        return Some(text.to_owned());
    }
    if let Some(number) = node.numeric_value() {
        return Some(number.to_string());
    }
    node.toggled().map(|toggled| {
        match toggled {
            Toggled::True => "on",
            Toggled::False => "off",
            Toggled::Mixed => "mixed",
        }
        .to_owned()
    })
}

/// `TextInput` → `text-input`.
fn kebab(role: Role) -> String {
    let mut text = String::new();
    for letter in format!("{role:?}").chars() {
        if letter.is_uppercase() && !text.is_empty() {
            text.push('-');
        }
        text.extend(letter.to_lowercase());
    }
    text
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::headless::{Headless, Screen};

    fn described(ui: impl FnMut(&mut egui::Ui)) -> Description {
        let screen = Screen { width: 800, height: 600, scale: 2.0, ..Screen::default() };
        let mut headless = Headless::new(screen, |ctx| ctx.enable_accesskit());
        let output = headless.settle(ui);
        let update = output.platform_output.accesskit_update.expect("tree");
        describe(&update, "test", [400, 300])
    }

    #[test]
    fn names_come_through_the_label_beside_a_field() {
        let mut text = "412".to_owned();
        let description = described(|ui| {
            let label = ui.label("Ramp start");
            ui.text_edit_singleline(&mut text).labelled_by(label.id);
        });
        let field = description.nodes.iter().find(|n| n.role == "text-input").expect("field");
        assert_eq!(field.name, "Ramp start");
        assert_eq!(field.value.as_deref(), Some("412"));
        assert!(field.focusable);
    }

    #[test]
    fn a_shown_number_carries_its_key_and_its_place() {
        let at = egui::Rect::from_min_size(egui::pos2(30.0, 40.0), egui::vec2(100.0, 20.0));
        let description = described(|ui| {
            let response = ui.put(at, egui::Label::new("2143"));
            ui.ctx().accesskit_node_builder(response.id, |node| {
                node.set_author_id("vo2-peak@peak".to_owned());
            });
        });
        let number = description.nodes.iter().find(|n| n.key.is_some()).expect("number");
        assert_eq!(number.key.as_deref(), Some("vo2-peak@peak"));
        assert_eq!((number.role.as_str(), number.name.as_str()), ("label", "2143"));
        // Points, although each has two pixels.
        let [x, y, w, h] = number.rect;
        assert!(x >= 30.0 && y >= 40.0 && x + w <= 130.0 && y + h <= 60.0, "{:?}", number.rect);
        assert!(!number.focusable);
    }

    #[test]
    fn roles_are_kebab_case() {
        assert_eq!(kebab(Role::TextInput), "text-input");
        assert_eq!(kebab(Role::Label), "label");
        assert_eq!(kebab(Role::CheckBox), "check-box");
    }
}
