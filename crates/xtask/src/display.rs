//! A virtual X display with a hand at its mouse and keys and an eye on its pixels.

use std::error::Error;
use std::io::{BufRead, BufReader};
use std::process::{Child, Command, Stdio};
use std::time::{Duration, Instant};

use x11rb::connection::Connection as _;
use x11rb::protocol::xproto::{self, ConfigureWindowAux, ConnectionExt as _, ImageFormat, Window};
use x11rb::protocol::xtest::ConnectionExt as _;
use x11rb::rust_connection::RustConnection;
use x11rb::wrapper::ConnectionExt as _;

/// Anything may go wrong on a display, and nothing can be done about it.
pub type Result<T> = std::result::Result<T, Box<dyn Error>>;

/// A machine may be busy with other things for so long.
const PATIENCE: Duration = Duration::from_secs(180);

/// A virtual display, ended with this value.
pub struct Display {
    server: Child,
    manager: Option<Child>,
    name: String,
    size: [u16; 2],
    connection: RustConnection,
    root: Window,
}

impl Display {
    /// Starts `Xvfb` with one screen of `size` pixels.
    ///
    /// # Errors
    /// Xvfb is not installed or does not answer.
    pub fn start(size: [u16; 2]) -> Result<Self> {
        let screen = format!("{}x{}x24", size[0], size[1]);
        let mut server = Command::new("Xvfb")
            .args(["-displayfd", "1", "-screen", "0", &screen, "-nolisten", "tcp"])
            .stdout(Stdio::piped())
            .stderr(Stdio::null())
            .spawn()
            .map_err(|error| format!("Xvfb: {error}"))?;
        let mut line = String::new();
        BufReader::new(server.stdout.take().ok_or("Xvfb says nothing")?).read_line(&mut line)?;
        let name = format!(":{}", line.trim());
        let (connection, screen) = RustConnection::connect(Some(&name))?;
        let root = connection.setup().roots[screen].root;
        Ok(Self { server, manager: None, name, size, connection, root })
    }

    /// Starts the window manager `openbox` and waits until it is in charge.
    ///
    /// # Errors
    /// It is not installed, or does not take over.
    pub fn manage(&mut self) -> Result<()> {
        let mut command = Command::new("openbox");
        command.args(["--sm-disable"]).env("DISPLAY", &self.name);
        command.stdout(Stdio::null()).stderr(Stdio::null());
        self.manager = Some(command.spawn().map_err(|error| format!("openbox: {error}"))?);
        let atom = self.atom("_NET_SUPPORTING_WM_CHECK")?;
        self.wait("the window manager", |display| {
            Ok(!display.property(display.root, atom)?.is_empty())
        })
    }

    /// Its name, as `DISPLAY` wants it.
    #[must_use]
    pub fn name(&self) -> &str {
        &self.name
    }

    /// Width and height, pixels.
    #[must_use]
    pub fn size(&self) -> [u16; 2] {
        self.size
    }

    /// Moves the mouse.
    ///
    /// # Errors
    /// The display does not answer.
    pub fn point(&self, x: i32, y: i32) -> Result<()> {
        let (x, y) = (i16::try_from(x)?, i16::try_from(y)?);
        self.fake(xproto::MOTION_NOTIFY_EVENT, 0, x, y)
    }

    /// Presses or releases the left button where the mouse is.
    ///
    /// # Errors
    /// The display does not answer.
    pub fn button(&self, pressed: bool) -> Result<()> {
        let kind = if pressed { xproto::BUTTON_PRESS_EVENT } else { xproto::BUTTON_RELEASE_EVENT };
        self.fake(kind, 1, 0, 0)
    }

    /// Turns the wheel by one notch.
    ///
    /// # Errors
    /// The display does not answer.
    pub fn wheel(&self, up: bool) -> Result<()> {
        let button = if up { 4 } else { 5 };
        self.fake(xproto::BUTTON_PRESS_EVENT, button, 0, 0)?;
        self.fake(xproto::BUTTON_RELEASE_EVENT, button, 0, 0)
    }

    /// Types the keys of these X key symbols together, e.g. Control and z.
    ///
    /// # Errors
    /// The keyboard has no such key, or the display does not answer.
    pub fn chord(&self, symbols: &[u32]) -> Result<()> {
        let codes: Vec<u8> = symbols.iter().map(|s| self.key(*s)).collect::<Result<_>>()?;
        for code in &codes {
            self.fake(xproto::KEY_PRESS_EVENT, *code, 0, 0)?;
        }
        for code in codes.iter().rev() {
            self.fake(xproto::KEY_RELEASE_EVENT, *code, 0, 0)?;
        }
        Ok(())
    }

    fn key(&self, symbol: u32) -> Result<u8> {
        let setup = self.connection.setup();
        let (first, last) = (setup.min_keycode, setup.max_keycode);
        let map = self.connection.get_keyboard_mapping(first, last - first + 1)?.reply()?;
        let per_key = usize::from(map.keysyms_per_keycode).max(1);
        let at = map.keysyms.iter().position(|s| *s == symbol).ok_or("no such key")?;
        Ok(first + u8::try_from(at / per_key)?)
    }

    fn fake(&self, kind: u8, detail: u8, x: i16, y: i16) -> Result<()> {
        self.connection.xtest_fake_input(kind, detail, 0, self.root, x, y, 0)?;
        self.connection.flush()?;
        Ok(())
    }

    /// The pixels of a rectangle of the screen, four bytes each, the last of them unused.
    ///
    /// # Errors
    /// The rectangle leaves the screen, or the display does not answer.
    pub fn pixels(&self, [x, y, width, height]: [u16; 4]) -> Result<Vec<u8>> {
        let (x, y) = (i16::try_from(x)?, i16::try_from(y)?);
        let format = ImageFormat::Z_PIXMAP;
        let reply = self.connection.get_image(format, self.root, x, y, width, height, u32::MAX)?;
        Ok(reply.reply()?.data)
    }

    /// The whole screen.
    ///
    /// # Errors
    /// The display does not answer.
    pub fn picture(&self) -> Result<Vec<u8>> {
        // In strips: a reply has a greatest length.
        let mut all = Vec::new();
        for y in (0..self.size[1]).step_by(64) {
            let height = 64.min(self.size[1] - y);
            all.extend(self.pixels([0, y, self.size[0], height])?);
        }
        Ok(all)
    }

    /// Waits until the pixels of `area` are no longer `before`, and returns them with the time
    /// that took; `None` when they have not changed after half a minute.
    ///
    /// # Errors
    /// The display does not answer.
    pub fn change(&self, area: [u16; 4], before: &[u8]) -> Result<Option<(Vec<u8>, Duration)>> {
        let start = Instant::now();
        while start.elapsed() < Duration::from_secs(30) {
            let now = self.pixels(area)?;
            if now != before {
                return Ok(Some((now, start.elapsed())));
            }
            std::thread::sleep(Duration::from_micros(200));
        }
        Ok(None)
    }

    /// Waits until the screen stands still for `calm`, and returns it.
    ///
    /// # Errors
    /// It never does within three minutes, or the display does not answer.
    pub fn still(&self, calm: Duration) -> Result<Vec<u8>> {
        let start = Instant::now();
        let mut before = self.picture()?;
        while start.elapsed() < PATIENCE {
            std::thread::sleep(calm);
            let now = self.picture()?;
            if now == before {
                return Ok(now);
            }
            before = now;
        }
        Err("the screen never stands still".into())
    }

    /// Waits for the program's window and returns it.
    ///
    /// # Errors
    /// None appears in three minutes.
    pub fn window(&self) -> Result<Window> {
        let mut found = None;
        self.wait("the window", |display| {
            found = display.find(display.root)?;
            Ok(found.is_some())
        })?;
        found.ok_or_else(|| "no window".into())
    }

    /// The visible window below `parent` that says it is the program's.
    fn find(&self, parent: Window) -> Result<Option<Window>> {
        let class = u32::from(xproto::AtomEnum::WM_CLASS);
        for child in self.connection.query_tree(parent)?.reply()?.children {
            let name = self.property(child, class)?;
            if String::from_utf8_lossy(&name).contains("rampcrest") && self.is_viewable(child)? {
                return Ok(Some(child));
            }
            if let Some(inner) = self.find(child)? {
                return Ok(Some(inner));
            }
        }
        Ok(None)
    }

    /// Whether `window` and all around it are mapped.
    ///
    /// # Errors
    /// There is no such window, or the display does not answer.
    pub fn is_viewable(&self, window: Window) -> Result<bool> {
        let state = self.connection.get_window_attributes(window)?.reply()?.map_state;
        Ok(state == xproto::MapState::VIEWABLE)
    }

    fn property(&self, window: Window, atom: u32) -> Result<Vec<u8>> {
        let any = u32::from(xproto::AtomEnum::ANY);
        Ok(self.connection.get_property(false, window, atom, any, 0, 64)?.reply()?.value)
    }

    fn atom(&self, name: &str) -> Result<u32> {
        Ok(self.connection.intern_atom(false, name.as_bytes())?.reply()?.atom)
    }

    /// Gives `window` a place and size, and the keys.
    ///
    /// # Errors
    /// The display does not answer.
    pub fn place(&self, window: Window, [x, y, width, height]: [u16; 4]) -> Result<()> {
        let place = ConfigureWindowAux::new().x(i32::from(x)).y(i32::from(y));
        let place = place.width(u32::from(width)).height(u32::from(height));
        self.connection.configure_window(window, &place)?;
        let (parent, now) = (xproto::InputFocus::PARENT, x11rb::CURRENT_TIME);
        self.connection.set_input_focus(parent, window, now)?;
        self.connection.sync()?;
        Ok(())
    }

    /// Where `window` stands on the screen, and its size.
    ///
    /// # Errors
    /// There is no such window, or the display does not answer.
    pub fn place_of(&self, window: Window) -> Result<[u16; 4]> {
        let size = self.connection.get_geometry(window)?.reply()?;
        let at = self.connection.translate_coordinates(window, self.root, 0, 0)?.reply()?;
        Ok([u16::try_from(at.dst_x)?, u16::try_from(at.dst_y)?, size.width, size.height])
    }

    /// Asks the window manager to minimise `window`, or to show it again.
    ///
    /// # Errors
    /// It does not within three minutes, or the display does not answer.
    pub fn minimise(&self, window: Window, away: bool) -> Result<()> {
        if away {
            // Iconic state (3), as the Inter-Client Communication Conventions Manual has it.
            let change = self.atom("WM_CHANGE_STATE")?;
            let event = xproto::ClientMessageEvent::new(32, window, change, [3, 0, 0, 0, 0]);
            let to =
                xproto::EventMask::SUBSTRUCTURE_REDIRECT | xproto::EventMask::SUBSTRUCTURE_NOTIFY;
            self.connection.send_event(false, self.root, to, event)?;
        } else {
            self.connection.map_window(window)?;
        }
        self.connection.sync()?;
        self.wait("the window manager", |display| Ok(display.is_viewable(window)? != away))
    }

    fn wait(&self, what: &str, mut done: impl FnMut(&Self) -> Result<bool>) -> Result<()> {
        let start = Instant::now();
        while start.elapsed() < PATIENCE {
            if done(self)? {
                return Ok(());
            }
            std::thread::sleep(Duration::from_millis(2));
        }
        Err(format!("{what} did not answer").into())
    }
}

impl Drop for Display {
    fn drop(&mut self) {
        for child in self.manager.iter_mut().chain([&mut self.server]) {
            let _ = child.kill();
            let _ = child.wait();
        }
    }
}
