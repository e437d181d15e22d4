//! A headless Chromium that a test drives, and its end.

use std::fs;
use std::io::{BufRead, BufReader};
use std::path::{Path, PathBuf};
use std::process::{Child, Command, Stdio};
use std::time::{Duration, Instant};

use fantoccini::actions::{Actions, InputSource, KeyAction, KeyActions};
use fantoccini::elements::Element;
use fantoccini::wd::WebDriverCompatibleCommand;
use fantoccini::{Client, ClientBuilder, Locator};
use hyper_util::client::legacy::connect::HttpConnector;
use serde_json::{Map, Value, json};
use tokio::runtime::{Builder, Runtime};

/// Names under which the driver and the browser are installed.
const DRIVERS: [&str; 1] = ["chromedriver"];
const BROWSERS: [&str; 3] = ["chromium", "chromium-browser", "google-chrome"];
/// What says that a machine without a browser fails the tests: the gate sets it.
const SWITCH: &str = "SECTILE_BROWSER";
/// How long anything that a page is waited for may take.
const PATIENCE: Duration = Duration::from_secs(20);

/// The first of these programs that a folder of the search path holds.
fn installed(names: &[&str]) -> Option<PathBuf> {
    let path = std::env::var_os("PATH")?;
    names
        .iter()
        .flat_map(|name| std::env::split_paths(&path).map(move |folder| folder.join(name)))
        .find(|file| file.is_file())
}

/// The driver's process; with it end the browsers that it started.
struct Driver {
    process: Child,
    port: u16,
}

impl Driver {
    /// On a port that the system chooses, read from what the driver says.
    fn start(program: &Path) -> Self {
        let mut command = Command::new(program);
        command.arg("--port=0");
        // A group of its own, which the browser's processes belong to as well.
        #[cfg(unix)]
        std::os::unix::process::CommandExt::process_group(&mut command, 0);
        let mut process = command
            .stdout(Stdio::piped())
            .stderr(Stdio::null())
            .spawn()
            .unwrap_or_else(|error| panic!("{}: {error}", program.display()));
        let said = BufReader::new(process.stdout.take().unwrap());
        let port = said.lines().map_while(Result::ok).find_map(|line| {
            let rest = line.split("started successfully on port ").nth(1)?;
            rest.trim_end_matches('.').parse().ok()
        });
        let mut driver = Self { process, port: 0 };
        driver.port = port.unwrap_or_else(|| panic!("{} names no port", program.display()));
        driver
    }
}

impl Drop for Driver {
    fn drop(&mut self) {
        #[cfg(unix)]
        let _ = Command::new("sh")
            .arg("-c")
            .arg(format!("kill -s KILL -- -{}", self.process.id()))
            .stderr(Stdio::null())
            .status();
        let _ = self.process.kill();
        let _ = self.process.wait();
    }
}

/// A request of the driver's that the client has no method for.
#[derive(Debug)]
struct Request {
    path: String,
    body: Option<Value>,
}

impl WebDriverCompatibleCommand for Request {
    fn endpoint(
        &self,
        base: &url::Url,
        session: Option<&str>,
    ) -> Result<url::Url, url::ParseError> {
        base.join(&format!("session/{}/{}", session.unwrap_or(""), self.path))
    }

    fn method_and_body(&self, _: &url::Url) -> (http::Method, Option<String>) {
        match &self.body {
            Some(body) => (http::Method::POST, Some(body.to_string())),
            None => (http::Method::GET, None),
        }
    }
}

/// A browser with one window. Its methods wait until what they ask for is done.
pub struct Chromium {
    runtime: Runtime,
    client: Client,
    // Dropped in this order: the driver and its browser end before their folder goes.
    _driver: Driver,
    _profile: tempfile::TempDir,
}

/// Runs a test in a browser of its own, then asserts that the page wrote no error to its console and asked
/// for nothing but files. Without a browser on the machine the test is left out, and says so.
pub fn with(test: impl FnOnce(&Chromium)) {
    let found = installed(&DRIVERS).zip(installed(&BROWSERS));
    let Some((driver, browser)) = found else {
        let remedy = "install Debian's packages chromium and chromium-driver";
        assert!(
            std::env::var(SWITCH).as_deref() != Ok("required"),
            "no chromedriver with its browser on this machine: {remedy}"
        );
        eprintln!("left out, no chromedriver with its browser on this machine: {remedy}");
        return;
    };
    let chromium = Chromium::start(&driver, &browser);
    test(&chromium);
    chromium.assert_quiet();
    chromium.close();
}

impl Chromium {
    fn start(driver: &Path, browser: &Path) -> Self {
        let runtime = Builder::new_current_thread().enable_all().build().unwrap();
        let driver = Driver::start(driver);
        let profile = tempfile::tempdir().unwrap();
        let mut args = vec![
            "--headless=new".to_string(),
            format!("--user-data-dir={}", profile.path().display()),
            "--window-size=1280,1000".to_string(),
            "--force-device-scale-factor=1".to_string(),
            "--lang=en".to_string(),
            "--disable-gpu".to_string(),
            "--disable-dev-shm-usage".to_string(),
            "--disable-background-networking".to_string(),
            "--no-first-run".to_string(),
            "--disable-breakpad".to_string(),
            // No name is resolved and no address reached: a page that fetched anything would fail.
            "--host-resolver-rules=MAP * ~NOTFOUND".to_string(),
        ];
        // The browser refuses its sandbox to root, as whom a container runs.
        if fs::metadata("/proc/self").is_ok_and(|own| is_root(&own)) {
            args.push("--no-sandbox".to_string());
        }
        let capabilities: Map<String, Value> = [
            (
                "goog:chromeOptions".to_string(),
                json!({ "binary": browser, "args": args }),
            ),
            ("goog:loggingPrefs".to_string(), json!({ "browser": "ALL" })),
        ]
        .into_iter()
        .collect();
        let address = format!("http://localhost:{}", driver.port);
        let client = runtime
            .block_on(
                ClientBuilder::new(HttpConnector::new())
                    .capabilities(capabilities)
                    .connect(&address),
            )
            .unwrap();
        Self {
            runtime,
            client,
            _driver: driver,
            _profile: profile,
        }
    }

    fn close(self) {
        let _ = self.runtime.block_on(self.client.clone().close());
    }

    fn request(&self, path: &str, body: Option<Value>) -> Value {
        let request = Request {
            path: path.to_string(),
            body,
        };
        self.runtime
            .block_on(self.client.issue_cmd(request))
            .unwrap_or_else(|error| panic!("{path}: {error}"))
    }

    /// A command of the browser's own protocol: emulation and the like.
    pub fn command(&self, name: &str, parameters: &Value) -> Value {
        let body = json!({ "cmd": name, "params": parameters });
        self.request("goog/cdp/execute", Some(body))
    }

    /// Shows a file from disk.
    pub fn open(&self, file: &Path) {
        let file = file.canonicalize().unwrap();
        let address = url::Url::from_file_path(&file).unwrap();
        self.runtime
            .block_on(self.client.goto(address.as_str()))
            .unwrap();
    }

    /// The value that a script returns.
    pub fn run(&self, script: &str) -> Value {
        self.runtime
            .block_on(self.client.execute(script, Vec::new()))
            .unwrap_or_else(|error| panic!("{script}: {error}"))
    }

    /// The text that a script returns.
    pub fn text(&self, script: &str) -> String {
        let value = self.run(script);
        match value.as_str() {
            Some(text) => text.to_string(),
            None => panic!("{script}: {value} is no text"),
        }
    }

    /// The number that a script returns.
    pub fn number(&self, script: &str) -> f64 {
        let value = self.run(script);
        value
            .as_f64()
            .unwrap_or_else(|| panic!("{script}: {value} is no number"))
    }

    /// Waits until a script returns true.
    pub fn wait(&self, script: &str) {
        let start = Instant::now();
        while self.run(script) != json!(true) {
            assert!(start.elapsed() < PATIENCE, "never came true: {script}");
            std::thread::sleep(Duration::from_millis(20));
        }
    }

    /// Waits until the page has drawn what was last asked of it.
    pub fn drawn(&self) {
        const TWO_FRAMES: &str = "const done = arguments[0]; requestAnimationFrame(() => requestAnimationFrame(() => done()));";
        self.runtime
            .block_on(self.client.execute_async(TWO_FRAMES, Vec::new()))
            .unwrap();
    }

    /// The one element that a selector names.
    pub fn element(&self, selector: &str) -> Element {
        self.runtime
            .block_on(self.client.find(Locator::Css(selector)))
            .unwrap_or_else(|error| panic!("{selector}: {error}"))
    }

    /// Clicks on an element.
    pub fn click(&self, selector: &str) {
        let element = self.element(selector);
        self.runtime.block_on(element.click()).unwrap();
    }

    /// Types into an element in place of what it holds.
    pub fn fill(&self, selector: &str, text: &str) {
        let element = self.element(selector);
        self.runtime.block_on(element.clear()).unwrap();
        self.runtime.block_on(element.send_keys(text)).unwrap();
    }

    /// Presses keys of the keyboard one after another, wherever the focus is.
    pub fn press(&self, keys: &str) {
        let keys = keys
            .chars()
            .flat_map(|value| [KeyAction::Down { value }, KeyAction::Up { value }]);
        let keyboard = KeyActions::new("keyboard".to_string());
        self.point(keys.fold(keyboard, InputSource::then));
    }

    /// Does something with the pointer or the keyboard.
    pub fn point(&self, actions: impl Into<Actions>) {
        self.runtime
            .block_on(self.client.perform_actions(actions))
            .unwrap();
    }

    /// The name and the role under which a screen reader tells of an element.
    pub fn told(&self, selector: &str) -> [String; 2] {
        let id = self.element(selector).element_id().to_string();
        ["computedlabel", "computedrole"].map(|what| {
            let told = self.request(&format!("element/{id}/{what}"), None);
            told.as_str().unwrap_or_default().to_string()
        })
    }

    /// The page as PDF on paper of this size in cm, by the page's own margins.
    pub fn print(&self, width: f64, height: f64) -> Vec<u8> {
        use base64::Engine;
        let body = json!({
            "page": { "width": width, "height": height },
            "margin": { "top": 1.6, "bottom": 1.6, "left": 1.4, "right": 1.4 },
        });
        let text = self.request("print", Some(body));
        base64::engine::general_purpose::STANDARD
            .decode(text.as_str().unwrap())
            .unwrap()
    }

    /// No error and no warning in the console since the last call, nothing asked for but files.
    pub fn assert_quiet(&self) {
        let log = self.request("se/log", Some(json!({ "type": "browser" })));
        let faults: Vec<&Value> = log
            .as_array()
            .unwrap()
            .iter()
            .filter(|entry| matches!(entry["level"].as_str(), Some("SEVERE" | "WARNING")))
            .collect();
        assert!(faults.is_empty(), "console: {faults:#?}");
        let asked = self.run(
            "return performance.getEntries().filter(e => 'initiatorType' in e).map(e => e.name);",
        );
        for name in asked.as_array().unwrap() {
            let name = name.as_str().unwrap();
            assert!(
                name.starts_with("file:") || name.starts_with("data:"),
                "asked for {name}"
            );
        }
    }
}

#[cfg(unix)]
fn is_root(own: &fs::Metadata) -> bool {
    use std::os::unix::fs::MetadataExt;
    own.uid() == 0
}

#[cfg(not(unix))]
fn is_root(_: &fs::Metadata) -> bool {
    false
}
