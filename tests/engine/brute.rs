//! A slow, obvious solver: every way, start on the grain and choice of members, task by task.

use crate::checker::{Stand, alone, link_holds, together, unlawful_duty};
use crate::instances::{GRAIN, SLOTS, slot};
use snugdown::schedule::outcome::ClassScore;
use snugdown::schedule::problem::{IfGivenUp, Need, Problem};
use snugdown::time::moment::Moment;

/// Give up when a search would take longer than this many trials.
const MOST_TRIALS: u64 = 3_000_000;

/// The least that must be given up and late, by class. `None` if it would take too long to tell.
pub fn best_classes(problem: &Problem) -> Option<Vec<ClassScore>> {
    let classes = problem.tasks.iter().map(|task| usize::from(task.class) + 1).max().unwrap_or(0);
    let most = ClassScore { given_up: u64::MAX, late: 0 };
    let fixed = problem.tasks.iter().enumerate().filter_map(|(task, data)| {
        let fixed = data.fixed.as_ref()?;
        let (way, start, finish) = (fixed.way, fixed.start, fixed.finish);
        Some(Stand { task, way, start, finish, members: fixed.members.clone() })
    });
    let mut search = Brute {
        problem,
        options: (0..problem.tasks.len()).map(|task| options(problem, task)).collect(),
        placed: fixed.collect(),
        given_up: Vec::new(),
        so_far: vec![ClassScore::default(); classes],
        best: vec![most; classes],
        trials: 0,
    };
    search.go(0);
    (search.trials <= MOST_TRIALS).then_some(search.best)
}

struct Brute<'a> {
    problem: &'a Problem,
    options: Vec<Vec<Stand>>,
    placed: Vec<Stand>,
    given_up: Vec<usize>,
    so_far: Vec<ClassScore>,
    best: Vec<ClassScore>,
    trials: u64,
}

impl Brute<'_> {
    /// Tasks are numbered so that links lead from lower to higher numbers.
    fn go(&mut self, task: usize) {
        if self.trials > MOST_TRIALS {
            return;
        }
        if task == self.problem.tasks.len() {
            if self.so_far < self.best {
                self.best = self.so_far.clone();
            }
            return;
        }
        let class = usize::from(self.problem.tasks[task].class);
        if let Some(fixed) = &self.problem.tasks[task].fixed {
            let late = self.late(task, fixed.finish);
            self.so_far[class].late += late;
            self.go(task + 1);
            self.so_far[class].late -= late;
            return;
        }
        for at in 0..self.options[task].len() {
            self.trials += 1;
            let option = self.options[task][at].clone();
            let late = self.late(task, option.finish);
            self.so_far[class].late += late;
            if self.so_far < self.best && self.fits(&option) {
                self.placed.push(option);
                self.go(task + 1);
                self.placed.pop();
            }
            self.so_far[class].late -= late;
        }
        let weight = u64::from(self.problem.tasks[task].weight.max(1));
        self.so_far[class].given_up += weight;
        if self.so_far < self.best {
            self.given_up.push(task);
            self.go(task + 1);
            self.given_up.pop();
        }
        self.so_far[class].given_up -= weight;
    }

    fn late(&self, task: usize, finish: Moment) -> u64 {
        let task = &self.problem.tasks[task];
        let late = [task.due, task.deadline].iter().flatten().map(|due| (finish - *due).get()).max();
        u64::try_from(late.unwrap_or(0)).unwrap_or(0)
    }

    fn fits(&self, option: &Stand) -> bool {
        let mut links = self.problem.links.iter().filter(|link| link.after == option.task);
        let are_kept = links.all(|link| {
            if self.given_up.contains(&link.before) {
                return link.if_given_up == IfGivenUp::StartAtDecision;
            }
            let before = self.placed.iter().find(|stand| stand.task == link.before);
            before.is_none_or(|before| link_holds(link.kind, link.lag, before, option))
        });
        if !are_kept || self.placed.iter().any(|other| !together(self.problem, other, option).is_empty()) {
            return false;
        }
        let with: Vec<&Stand> = self.placed.iter().chain([option]).collect();
        unlawful_duty(self.problem, &with).is_empty()
    }
}

fn options(problem: &Problem, task: usize) -> Vec<Stand> {
    let mut options = Vec::new();
    for (number, way) in problem.tasks[task].ways.iter().enumerate() {
        let teams = teams(&way.needs);
        for start in (0..=SLOTS).map(slot) {
            for members in &teams {
                let finish = start + way.takes;
                let stand = Stand { task, way: number, start, finish, members: members.clone() };
                if alone(problem, &stand).is_empty() {
                    options.push(stand);
                }
            }
        }
    }
    assert_eq!(problem.now.epoch_minutes() % GRAIN, 0);
    options
}

fn teams(needs: &[Need]) -> Vec<Vec<Vec<usize>>> {
    let Some((first, rest)) = needs.split_first() else { return vec![vec![]] };
    let mut all = Vec::new();
    for chosen in some_of(&first.able, first.count) {
        for mut others in teams(rest) {
            others.insert(0, chosen.clone());
            all.push(others);
        }
    }
    all
}

fn some_of(able: &[usize], count: usize) -> Vec<Vec<usize>> {
    if count == 0 {
        return vec![vec![]];
    }
    let mut all = Vec::new();
    for (at, member) in able.iter().enumerate() {
        for mut others in some_of(&able[at + 1..], count - 1) {
            others.insert(0, *member);
            all.push(others);
        }
    }
    all
}
