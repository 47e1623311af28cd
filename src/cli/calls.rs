//! `snugdown calls`: who must be told what, by when, and the texts to paste or read out.

use crate::cli::clock::port_now;
use crate::cli::exit::{Exit, Failure};
use crate::cli::load::load;
use crate::cli::planning::{exit_of, latest, plans_until};
use crate::cli::port_args::PortArgs;
use crate::cli::screen::{show, width};
use crate::finding::fault::nearest;
use crate::output::call_text::call_text;
use crate::output::calls_text::{calls_text, is_for};
use crate::output::setting::Setting;
use crate::output::wire::calls::calls_out;
use crate::output::wire::value::to_text;
use crate::plan::call::Call;
use crate::plan::sheet::Plan;
use clap::Args;

/// What `calls` is asked.
#[derive(Clone, Debug, Args)]
#[command(after_help = AFTER_HELP)]
pub struct CallsArgs {
    /// The port
    #[command(flatten)]
    pub port: PortArgs,
    /// Write the texts of these calls, to paste or to read out
    #[arg(value_name = "CALL")]
    pub ids: Vec<String>,
    /// Only calls to these people: by title, or by ship
    #[arg(long = "for", value_name = "WHO")]
    pub concerning: Option<String>,
    /// Write the texts of all calls shown
    #[arg(long, conflicts_with = "json")]
    pub text: bool,
    /// The present time; else the port's exercise clock, else the system's
    #[arg(long, value_name = "TIME")]
    pub now: Option<String>,
    /// Write JSON, texts included
    #[arg(long)]
    pub json: bool,
    /// Columns of the list
    #[arg(long, value_name = "COLUMNS")]
    pub width: Option<usize>,
}

/// Stands under the help of the command.
const AFTER_HELP: &str = "\
A call is one addressee and one matter: a task that is no longer as the plan issued last had it ('order issue'), a decision \
that is due, a duty that a declared stage lays on people. A text is at most 700 ASCII characters, and says DRAFT until \
'called released' names who releases it. The program sends nothing.

Examples:
  snugdown calls demo-port
  snugdown calls demo-port --for 'tug office' --text
  snugdown calls demo-port --json | jq -r '.calls[] | select(.overdue) | .text'";

/// Shows the calls.
///
/// # Errors
/// Any [`Failure`].
pub fn run(args: &CallsArgs) -> Result<Exit, Failure> {
    let loaded = load(&args.port)?;
    let record = loaded.head_words();
    let setting = Setting::of(&loaded.port, &loaded.rules).with_record(&record);
    let now = port_now(args.now.as_deref(), setting.clock, loaded.port.exercise)?;
    let history = plans_until(&loaded, now);
    let plan = latest(&history)?;
    let calls = chosen(args, plan)?;
    if args.json {
        show(&to_text(&calls_out(&calls, plan, &setting))?)?;
    } else if args.text || !args.ids.is_empty() {
        let texts: Vec<String> = calls.iter().map(|call| call_text(call, plan, &setting) + "\n").collect();
        show(&texts.join("\n"))?;
    } else {
        show(&calls_text(&calls, plan, &setting, width(args.width)))?;
    }
    Ok(exit_of(plan, &loaded))
}

fn chosen<'a>(args: &CallsArgs, plan: &'a Plan) -> Result<Vec<&'a Call>, Failure> {
    for id in &args.ids {
        find(plan, id)?;
    }
    let is_asked = |call: &&Call| {
        let by_id = args.ids.is_empty() || args.ids.iter().any(|id| is_id(call, id));
        by_id && args.concerning.as_ref().is_none_or(|who| is_for(call, who))
    };
    let calls: Vec<&Call> = plan.calls.iter().filter(is_asked).collect();
    if let Some(who) = args.concerning.as_ref().filter(|_| calls.is_empty()) {
        // An empty list for a misspelt name would look like a quiet night.
        let all = plan.calls.iter().map(|call| call.to.who.as_str());
        let offices = plan.tasks.iter().flat_map(|task| task.approvers.iter().chain([&task.who]));
        let known: Vec<&str> = all.chain(offices.map(String::as_str)).collect();
        if !known.iter().any(|name| name.to_lowercase() == who.trim().to_lowercase()) {
            let hint =
                nearest(who, known).map_or(String::new(), |meant| format!("; did you mean \"{meant}\"?"));
            return Err(Failure::Usage(format!("--for: nobody here is called \"{who}\"{hint}")));
        }
    }
    Ok(calls)
}

fn is_id(call: &Call, id: &str) -> bool {
    call.id.eq_ignore_ascii_case(id.trim())
}

/// The call of a plan with this id.
///
/// # Errors
/// [`Failure::Usage`] if there is none.
pub fn find<'a>(plan: &'a Plan, id: &str) -> Result<&'a Call, Failure> {
    plan.calls.iter().find(|call| is_id(call, id)).ok_or_else(|| {
        let hint = nearest(&id.to_uppercase(), plan.calls.iter().map(|call| call.id.as_str()))
            .map_or(String::new(), |meant| format!("; did you mean {meant}?"));
        Failure::Usage(format!("no call {id} is to be made now; 'snugdown calls' lists all{hint}"))
    })
}
