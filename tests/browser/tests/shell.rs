//! The page starts, keeps to itself, and opens again without its server.

use walkthrough::walk;

#[test]
fn starts_and_keeps_to_itself() {
    walk("start", async |page| {
        page.viewport(360, 800).await?;
        page.goto("").await?;
        page.until_offline_ready().await?;
        assert_eq!(
            page.script("return document.title", vec![]).await?,
            "Fallwright"
        );
        let requests = page.requests().await?;
        assert!(
            requests.iter().any(|url| url.ends_with(".wasm")),
            "{requests:?}"
        );
        page.check_access().await?;
        page.check_narrow().await?;
        page.screenshot("start-360").await
    });
}

#[test]
fn the_policy_refuses_what_is_not_ours() {
    walk("policy", async |page| {
        page.goto("").await?;
        let refused = page
            .script(
                "const script = document.createElement('script');
                 script.textContent = 'window.intruder = 1';
                 document.body.append(script);
                 return window.intruder === undefined;",
                vec![],
            )
            .await?;
        assert_eq!(refused, true, "an inline script ran");
        // Port 9 is never listened on; the policy refuses before anything is asked.
        let fetched = page
            .script(
                "return fetch('http://127.0.0.1:9/').then(() => 'fetched', String)",
                vec![],
            )
            .await?;
        assert!(
            fetched
                .as_str()
                .is_some_and(|text| text.contains("TypeError")),
            "{fetched}"
        );
        let provoked = page.expect_errors("Content Security Policy").await?;
        assert!(provoked >= 2, "the policy spoke up {provoked} times");
        Ok(())
    });
}

#[test]
fn opens_cold_without_its_server() {
    walk("offline", async |page| {
        page.goto("").await?;
        page.until_offline_ready().await?;
        page.close().await?;
        page.stop_server();
        page.start().await?;
        page.goto("").await?;
        page.find("heading", "Fallwright").await?;
        page.goto("?from=somewhere#pipe").await?;
        Ok(())
    });
}
