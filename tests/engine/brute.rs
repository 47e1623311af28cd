//! A slow, obvious solver: every way, start on the grain and choice of members, task by task.

use crate::checker::{Stand, alone, link_holds, together, unlawful_duty};
use crate::instances::{GRAIN, SLOTS, slot};
use snugdown::schedule::problem::{IfGivenUp, Need, Problem};

/// Give up when a search would take longer than this many trials.
const MOST_TRIALS: u64 = 3_000_000;

/// The least that must be given up: the sum of weights by class. `None` if it would take too long to tell.
pub fn least_given_up(problem: &Problem) -> Option<Vec<u64>> {
    let classes = problem.tasks.iter().map(|task| usize::from(task.class) + 1).max().unwrap_or(0);
    let mut all = vec![0; classes];
    for task in problem.tasks.iter().filter(|task| task.fixed.is_none()) {
        all[usize::from(task.class)] += u64::from(task.weight.max(1));
    }
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
        weights: vec![0; classes],
        best: all,
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
    weights: Vec<u64>,
    best: Vec<u64>,
    trials: u64,
}

impl Brute<'_> {
    /// Tasks are numbered so that links lead from lower to higher numbers.
    fn go(&mut self, task: usize) {
        if self.trials > MOST_TRIALS {
            return;
        }
        if task == self.problem.tasks.len() {
            if self.weights < self.best {
                self.best = self.weights.clone();
            }
            return;
        }
        if self.problem.tasks[task].fixed.is_some() {
            self.go(task + 1);
            return;
        }
        for at in 0..self.options[task].len() {
            self.trials += 1;
            let option = self.options[task][at].clone();
            if self.weights < self.best && self.fits(&option) {
                self.placed.push(option);
                self.go(task + 1);
                self.placed.pop();
            }
        }
        let class = usize::from(self.problem.tasks[task].class);
        let weight = u64::from(self.problem.tasks[task].weight.max(1));
        self.weights[class] += weight;
        if self.weights < self.best {
            self.given_up.push(task);
            self.go(task + 1);
            self.given_up.pop();
        }
        self.weights[class] -= weight;
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
