use std::time::Duration;

use elbowroom::review::{Desk, Told};

use crate::cases::demonstration;

/// Longer than any search here takes; only a search that hangs runs into it.
const LONG: Duration = Duration::from_secs(120);

#[test]
fn a_newer_errand_stops_the_older_one_and_only_its_news_counts() {
    let judged = demonstration();
    let mut desk = Desk::start().expect("a thread");
    let older = desk.submit(&judged, &judged.survey.findings[0]);
    let newer = desk.submit(&judged, judged.survey.findings.last().expect("some"));
    assert!(newer > older);
    assert_eq!(desk.progress().map(|[tried, _]| tried), Some(0));
    let mut told = Vec::new();
    loop {
        let news = desk.news().recv_timeout(LONG).expect("the search goes on");
        let (errand, ends) = (news.errand, news.told.is_none());
        let accepted = desk.accept(news);
        assert!(accepted.is_none() || errand == newer, "news of the older errand is dropped");
        told.extend(accepted);
        if errand == newer && ends {
            break;
        }
    }
    assert!(told.iter().any(|news| matches!(news, Told::Found(_))));
    assert!(desk.progress().is_none());
}

#[test]
fn a_stopped_desk_tells_no_more_than_the_end() {
    let judged = demonstration();
    let mut desk = Desk::start().expect("a thread");
    desk.submit(&judged, &judged.survey.findings[0]);
    desk.stop();
    assert!(desk.progress().is_none());
    let again = desk.submit(&judged, judged.survey.findings.last().expect("some"));
    let first = desk.news().recv_timeout(LONG).expect("it goes on");
    assert!(first.errand <= again);
}
