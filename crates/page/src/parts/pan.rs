//! Pan and zoom of the opened drawing: which part of a larger picture a window
//! shows.

/// Greatest zoom: a line of fifty stations, a station at a time.
const MOST: f64 = 12.0;

/// The part in view. The picture is the window's size times the zoom.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct View {
    /// Size of the window.
    pub window: (f64, f64),
    /// Picture over window; 1 shows the whole.
    pub zoom: f64,
    /// Upper left corner of the window in the picture.
    pub at: (f64, f64),
}

impl View {
    /// The whole picture.
    #[must_use]
    pub fn whole(window: (f64, f64)) -> View {
        View {
            window,
            zoom: 1.0,
            at: (0.0, 0.0),
        }
    }

    /// Size of the picture.
    #[must_use]
    pub fn picture(&self) -> (f64, f64) {
        (self.window.0 * self.zoom, self.window.1 * self.zoom)
    }

    /// Zoomed by a factor, the place under `point` of the window staying there.
    #[must_use]
    pub fn zoomed(self, factor: f64, point: (f64, f64)) -> View {
        let zoom = (self.zoom * factor).clamp(1.0, MOST);
        let grown = zoom / self.zoom;
        let at = (
            (self.at.0 + point.0) * grown - point.0,
            (self.at.1 + point.1) * grown - point.1,
        );
        View { zoom, at, ..self }.kept_in()
    }

    /// Dragged by this much.
    #[must_use]
    pub fn dragged(self, by: (f64, f64)) -> View {
        let at = (self.at.0 - by.0, self.at.1 - by.1);
        View { at, ..self }.kept_in()
    }

    /// The same part in a window of another size.
    #[must_use]
    pub fn resized(self, window: (f64, f64)) -> View {
        let scale = (window.0 / self.window.0, window.1 / self.window.1);
        let at = (self.at.0 * scale.0, self.at.1 * scale.1);
        View { window, at, ..self }.kept_in()
    }

    /// `viewBox` of the window.
    #[must_use]
    pub fn view_box(&self) -> String {
        format!(
            "{:.1} {:.1} {:.1} {:.1}",
            self.at.0, self.at.1, self.window.0, self.window.1
        )
    }

    fn kept_in(self) -> View {
        let picture = self.picture();
        let within = |at: f64, window: f64, picture: f64| at.min(picture - window).max(0.0);
        let at = (
            within(self.at.0, self.window.0, picture.0),
            within(self.at.1, self.window.1, picture.1),
        );
        View { at, ..self }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn what_is_under_the_finger_stays_there() {
        let view = View::whole((300.0, 200.0)).zoomed(2.0, (150.0, 100.0));
        assert_eq!(view.picture(), (600.0, 400.0));
        assert_eq!(view.at, (150.0, 100.0));
        let closer = view.zoomed(1.5, (100.0, 50.0));
        let place = |v: &View| ((v.at.0 + 100.0) / v.zoom, (v.at.1 + 50.0) / v.zoom);
        assert!((place(&view).0 - place(&closer).0).abs() < 1e-9);
        assert!((place(&view).1 - place(&closer).1).abs() < 1e-9);
    }

    proptest! {
        #[test]
        fn the_window_never_leaves_the_picture(
            steps in proptest::collection::vec((0.2..5.0f64, 0.0..300.0f64, 0.0..200.0f64, -900.0..900.0f64), 0..30),
        ) {
            let mut view = View::whole((300.0, 200.0));
            for (factor, x, y, by) in steps {
                view = view.zoomed(factor, (x, y)).dragged((by, -by));
                let picture = view.picture();
                prop_assert!(view.at.0 >= 0.0 && view.at.1 >= 0.0);
                prop_assert!(view.at.0 + 300.0 <= picture.0 + 1e-6);
                prop_assert!(view.at.1 + 200.0 <= picture.1 + 1e-6);
            }
            let whole = view.zoomed(1e-6, (0.0, 0.0));
            prop_assert_eq!(whole.at, (0.0, 0.0));
        }
    }
}
