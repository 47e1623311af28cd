//! From templates to tasks: one graph of everything that has to be done, tied together.

use crate::finding::fault::{Finding, nearest};
use crate::port::fleet::OwnValue;
use crate::port::harbour::Port;
use crate::rules::limit::Anchor;
use crate::rules::pick::ForEach;
use crate::rules::stage::{Rules, Trigger};
use crate::rules::task::{Amount, LinkSpec, LinkTarget, NotBefore, TaskSpec};
use crate::units::length::Metres;
use crate::work::circle::circles;
use crate::work::graph::{Edge, Node, Task, TaskCut, TaskNeed, TaskSubstitute, Thing, WorkGraph, stage_key};
use petgraph::graph::NodeIndex;
use std::collections::BTreeMap;

/// The work graph of a port, and what is wrong with it: unknown link targets, double ids, circles (each named whole,
/// stages included). With an error finding the graph must not be planned on.
#[must_use]
pub fn expand(port: &Port, rules: &Rules) -> (WorkGraph, Vec<Finding>) {
    let mut builder =
        Builder { port, rules, work: WorkGraph::default(), specs: Vec::new(), findings: Vec::new() };
    for (position, stage) in rules.stages.iter().enumerate() {
        builder.work.add(&stage_key(&stage.id), Node::Stage(position));
    }
    for spec in &rules.tasks {
        builder.add_instances(spec);
    }
    builder.tie_tasks();
    builder.tie_stages();
    builder.name_stand_ins();
    let circles = circles(&builder.work, rules);
    builder.findings.extend(circles);
    (builder.work, builder.findings)
}

struct Builder<'a> {
    port: &'a Port,
    rules: &'a Rules,
    work: WorkGraph,
    /// Which node came from which spec, in the order of the files.
    specs: Vec<(NodeIndex, &'a TaskSpec)>,
    findings: Vec<Finding>,
}

impl<'a> Builder<'a> {
    fn add_instances(&mut self, spec: &'a TaskSpec) {
        let port = self.port;
        let things: Vec<Thing> = match &spec.for_each {
            None => vec![Thing::Port],
            Some(ForEach::Ship(pick)) => (0..)
                .zip(&port.ships)
                .filter(|(_, ship)| pick.takes_ship(ship))
                .map(|(position, _)| Thing::Ship(position))
                .collect(),
            Some(ForEach::Plant(pick)) => (0..)
                .zip(&port.plant)
                .filter(|(_, plant)| pick.takes_plant(plant))
                .map(|(position, _)| Thing::Plant(position))
                .collect(),
            Some(ForEach::Berth(pick)) => (0..)
                .zip(&port.berths)
                .filter(|(_, berth)| pick.takes_berth(berth))
                .map(|(position, _)| Thing::Berth(position))
                .collect(),
        };
        for thing in things {
            let task = self.instance(spec, thing);
            let id = task.id.clone();
            if self.work.find(&id).is_some() {
                self.findings.push(Finding::error(
                    "work-double-task",
                    spec.written.clone(),
                    format!("task \"{id}\" comes out of the files twice"),
                    "every task has one id",
                    "rename one of the templates",
                ));
            }
            let index = self.work.add(&id, Node::Task(Box::new(task)));
            self.specs.push((index, spec));
        }
    }

    fn instance(&mut self, spec: &TaskSpec, thing: Thing) -> Task {
        let face = self.face(thing);
        let id = if face.id.is_empty() { spec.id.clone() } else { format!("{}/{}", face.id, spec.id) };
        let takes = self.own(spec, &face, &spec.takes, |value| match value {
            OwnValue::Lasting(minutes) => Some(*minutes),
            OwnValue::Count(_) | OwnValue::At(_) | OwnValue::Class(_) => None,
        });
        let cut = spec.may_be_cut.as_ref().and_then(|cut| {
            let to = self.own(spec, &face, &cut.to, |value| match value {
                OwnValue::Lasting(minutes) => Some(*minutes),
                OwnValue::Count(_) | OwnValue::At(_) | OwnValue::Class(_) => None,
            })?;
            Some(TaskCut { to, price: face.fill(&cut.price), leave: cut.leave })
        });
        let or_else = spec.or_else.as_ref().map(|substitute| TaskSubstitute {
            tasks: substitute.tasks.iter().map(|task| face.sibling(task)).collect(),
            price: face.fill(&substitute.price),
            leave: substitute.leave,
        });
        Task {
            name: face.fill(&spec.name),
            thing,
            takes: takes.unwrap_or_default(),
            cut,
            or_else,
            stands_in_for: Vec::new(),
            gate: spec.gate.as_ref().and_then(|gate| self.stage_position(gate)),
            not_before: self.not_before(spec, &face),
            done_before: spec.done_before.clone(),
            stops_at: spec.stops_at.clone(),
            tide: spec.tide.clone().map(|need| (need, face.draught)),
            daylight: spec.daylight,
            passage: spec.passage.clone().map(|passage| {
                let class = self.port.channel(&passage.channel).map_or(0, |c| c.class_of(face.draught));
                (passage, class)
            }),
            needs: self.needs(spec, &face),
            who: face.fill(&spec.who),
            approvers: spec.approvers.clone(),
            confirm: spec.confirm.clone(),
            at: if spec.at.is_empty() { face.berth_name.clone() } else { self.place_words(&spec.at) },
            stake: spec.stake,
            weight: spec.weight,
            basis: spec.basis.clone(),
            id,
        }
    }

    fn not_before(&mut self, spec: &TaskSpec, face: &Face<'_>) -> Vec<NotBefore> {
        let mut times = Vec::new();
        for condition in &spec.not_before {
            match condition {
                NotBefore::Own(name) => {
                    let own = Amount::Own(name.clone());
                    let time = self.own(spec, face, &own, |value| match value {
                        OwnValue::At(time) => Some(*time),
                        OwnValue::Count(_) | OwnValue::Lasting(_) | OwnValue::Class(_) => None,
                    });
                    times.extend(time.map(NotBefore::At));
                }
                NotBefore::After(..) | NotBefore::At(_) => times.push(condition.clone()),
            }
        }
        times
    }

    fn needs(&mut self, spec: &TaskSpec, face: &Face<'_>) -> Vec<TaskNeed> {
        let mut needs = Vec::new();
        for need in &spec.needs {
            let Some(pool) = self.port.pools.iter().position(|pool| pool.id == need.pool) else { continue };
            let count = self.own(spec, face, &need.count, |value| match value {
                OwnValue::Count(count) => Some(*count),
                OwnValue::Lasting(_) | OwnValue::At(_) | OwnValue::Class(_) => None,
            });
            let class = need.class.as_ref().and_then(|class| {
                self.own(spec, face, class, |value| match value {
                    OwnValue::Class(class) => Some(class.clone()),
                    OwnValue::Count(_) | OwnValue::Lasting(_) | OwnValue::At(_) => None,
                })
            });
            let members = self.port.pools.get(pool).map(|pool| pool.members.as_slice()).unwrap_or_default();
            let able = (0..)
                .zip(members)
                .filter(|(_, member)| class.as_ref().is_none_or(|class| member.classes.contains(class)))
                .map(|(position, _)| position)
                .collect();
            let count = usize::try_from(count.unwrap_or_default()).unwrap_or_default();
            if count > 0 {
                needs.push(TaskNeed { pool, count, able, before: need.before, after: need.after });
            }
        }
        needs
    }

    /// A stated amount, or the thing's own value; its absence is a finding.
    fn own<T: Clone>(
        &mut self,
        spec: &TaskSpec,
        face: &Face<'_>,
        amount: &Amount<T>,
        read: impl Fn(&OwnValue) -> Option<T>,
    ) -> Option<T> {
        let name = match amount {
            Amount::Stated(value) => return Some(value.clone()),
            Amount::Own(name) => name,
        };
        let value = face.own.and_then(|own| own.get(name)).and_then(read);
        if value.is_none() {
            self.findings.push(Finding::error(
                "work-own-value-missing",
                spec.written.clone(),
                format!(
                    "task \"{}\" asks \"{}\" for its own value \"{name}\", which it lacks",
                    spec.id, face.id
                ),
                "a value of the kind that the template needs (number, duration, time or class)",
                format!("add {name} to the own values of \"{}\", or narrow the template", face.id),
            ));
        }
        value
    }

    fn stage_position(&self, id: &str) -> Option<usize> {
        self.rules.stages.iter().position(|stage| stage.id == id)
    }

    fn place_words(&self, at: &str) -> String {
        let berth = self.port.berth(at).map(|berth| berth.name.clone());
        berth.or_else(|| self.port.place(at).map(|place| place.name.clone())).unwrap_or_else(|| at.to_owned())
    }

    fn face(&self, thing: Thing) -> Face<'a> {
        let port = self.port;
        let berth_name = |id: &str| port.berth(id).map_or_else(|| id.to_owned(), |berth| berth.name.clone());
        let of_port =
            Face { id: "", name: &port.name, berth_name: String::new(), draught: Metres::ZERO, own: None };
        let face = match thing {
            Thing::Port => None,
            Thing::Ship(position) => port.ships.get(position).map(|ship| Face {
                id: &ship.id,
                name: &ship.name,
                berth_name: berth_name(&ship.berth),
                draught: ship.draught,
                own: Some(&ship.own),
            }),
            Thing::Plant(position) => port.plant.get(position).map(|plant| Face {
                id: &plant.id,
                name: &plant.name,
                berth_name: berth_name(&plant.berth),
                draught: Metres::ZERO,
                own: Some(&plant.own),
            }),
            Thing::Berth(position) => port.berths.get(position).map(|berth| Face {
                id: &berth.id,
                name: &berth.name,
                berth_name: berth.name.clone(),
                draught: Metres::ZERO,
                own: Some(&berth.own),
            }),
        };
        face.unwrap_or(of_port)
    }

    fn tie_tasks(&mut self) {
        for (after, spec) in self.specs.clone() {
            for link in &spec.after {
                let edge = Edge::Link { kind: link.kind, lag: link.lag, if_given_up: link.if_given_up };
                for before in self.targets(link, after) {
                    self.work.graph.add_edge(before, after, edge);
                }
            }
            if let Some(stage) = spec.gate.as_ref().and_then(|gate| self.work.find(&stage_key(gate))) {
                self.work.graph.add_edge(stage, after, Edge::Gate);
            }
            for deadline in &spec.done_before {
                if let Anchor::Stage(stage) = &deadline.anchor
                    && let Some(stage) = self.work.find(&stage_key(stage))
                    && deadline.lead.get() >= 0
                {
                    self.work.graph.add_edge(after, stage, Edge::Before);
                }
            }
        }
    }

    fn tie_stages(&mut self) {
        for stage in &self.rules.stages {
            let Some(this) = self.work.find(&stage_key(&stage.id)) else { continue };
            for trigger in &stage.any {
                if let Trigger::Stage { stage: other, .. } = trigger
                    && let Some(other) = self.work.find(&stage_key(other))
                {
                    self.work.graph.add_edge(other, this, Edge::Counts);
                }
            }
            for link in &stage.after {
                for before in self.targets(link, this) {
                    self.work.graph.add_edge(before, this, Edge::Before);
                }
            }
        }
    }

    /// The nodes that a link comes from; an unknown name is a finding, a thing without that template is not.
    fn targets(&mut self, link: &LinkSpec, waits: NodeIndex) -> Vec<NodeIndex> {
        let thing = self.work.task_at(waits).map_or(Thing::Port, |task| task.thing);
        let berth = self.berth_of(thing);
        let same_berth = |other: Thing| berth.is_some() && self.berth_of(other) == berth;
        let (name, keep): (&str, Box<dyn Fn(Thing) -> bool + '_>) = match &link.task {
            LinkTarget::Task(id) => {
                let found = self.work.find(id);
                if found.is_none() {
                    self.unknown(link, id);
                }
                return found.into_iter().collect();
            }
            LinkTarget::Same(name) => (name, Box::new(move |other| other == thing)),
            LinkTarget::Every(name) => (name, Box::new(|_| true)),
            LinkTarget::ShipsAtBerth(name) => {
                (name, Box::new(move |other| matches!(other, Thing::Ship(_)) && same_berth(other)))
            }
            LinkTarget::PlantAtBerth(name) => {
                (name, Box::new(move |other| matches!(other, Thing::Plant(_)) && same_berth(other)))
            }
        };
        let of_template: Vec<NodeIndex> =
            self.specs.iter().filter(|(_, spec)| spec.id == *name).map(|(index, _)| *index).collect();
        let kept: Vec<NodeIndex> = of_template
            .iter()
            .copied()
            .filter(|index| *index != waits && self.work.task_at(*index).is_some_and(|task| keep(task.thing)))
            .collect();
        drop(keep);
        if of_template.is_empty() && !self.rules.tasks.iter().any(|spec| spec.id == *name) {
            self.unknown(link, name);
        }
        kept
    }

    fn berth_of(&self, thing: Thing) -> Option<&'a str> {
        let port = self.port;
        match thing {
            Thing::Port => None,
            Thing::Ship(position) => port.ships.get(position).map(|ship| ship.berth.as_str()),
            Thing::Plant(position) => port.plant.get(position).map(|plant| plant.berth.as_str()),
            Thing::Berth(position) => port.berths.get(position).map(|berth| berth.id.as_str()),
        }
    }

    fn unknown(&mut self, link: &LinkSpec, id: &str) {
        let templates = self.rules.tasks.iter().map(|spec| spec.id.as_str());
        let known: Vec<&str> = self.work.task_ids().chain(templates).collect();
        let hint = nearest(id, known).map_or_else(String::new, |name| format!("did you mean \"{name}\"? "));
        let finding = Finding::error(
            "work-unknown-task",
            link.written.clone(),
            format!("it waits for \"{id}\", and there is no such task or template"),
            "a task's full id (\"H05\", \"V10/sail\") or a template's id",
            format!("{hint}correct the name or add the task"),
        );
        self.findings.push(finding);
    }

    /// Tells every stand-in for which tasks it stands in.
    fn name_stand_ins(&mut self) {
        let mut stand_ins: BTreeMap<NodeIndex, Vec<String>> = BTreeMap::new();
        for (index, spec) in self.specs.clone() {
            let Some(task) = self.work.task_at(index) else { continue };
            let Some(substitute) = &task.or_else else { continue };
            let (own_id, wanted) = (task.id.clone(), substitute.tasks.clone());
            for id in wanted {
                match self.work.find(&id) {
                    Some(stand_in) => stand_ins.entry(stand_in).or_default().push(own_id.clone()),
                    None => self.findings.push(Finding::error(
                        "work-unknown-substitute",
                        spec.written.clone(),
                        format!("\"{id}\" is to stand in for \"{own_id}\", and there is no such task"),
                        "a template of the same thing, or a task's full id",
                        "correct the name or add the task",
                    )),
                }
            }
        }
        for (index, tasks) in stand_ins {
            if let Some(Node::Task(task)) = self.work.graph.node_weight_mut(index) {
                task.stands_in_for = tasks;
            }
        }
    }
}

/// What a template sees of the thing it is repeated for.
struct Face<'a> {
    id: &'a str,
    name: &'a str,
    berth_name: String,
    draught: Metres,
    own: Option<&'a BTreeMap<String, OwnValue>>,
}

impl Face<'_> {
    fn fill(&self, words: &str) -> String {
        words.replace("{name}", self.name).replace("{id}", self.id).replace("{berth}", &self.berth_name)
    }

    /// The same thing's instance of another template, or the id itself if it is a full one.
    fn sibling(&self, id: &str) -> String {
        if self.id.is_empty() || id.contains('/') { id.to_owned() } else { format!("{}/{id}", self.id) }
    }
}
