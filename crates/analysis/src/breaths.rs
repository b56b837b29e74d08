//! The breath table: one row per breath, columns of optional values in canonical units.

use std::collections::BTreeMap;

use crate::quantity::Quantity;

/// A column of one value per breath; `None` is a missing value, never zero.
pub type Column = Vec<Option<f64>>;

/// Breaths in rising time. Values are finite; what was not finite is `None`.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Breaths {
    /// End of each breath, s, the file's own time, rising.
    end_s: Vec<f64>,
    /// Duration of each breath, s, > 0.
    duration_s: Vec<f64>,
    columns: BTreeMap<Quantity, Column>,
}

/// Why a table of breaths cannot be formed.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum BreathsError {
    /// Columns are of different lengths.
    Length,
    /// A time is not finite or does not rise at this row.
    Time(usize),
}

impl Breaths {
    /// Forms the table. Durations that are missing or not positive become the step to the breath
    /// before; non-finite values become missing.
    ///
    /// # Errors
    /// [`BreathsError`] when lengths differ or time does not rise.
    pub fn new(
        end_s: Vec<f64>,
        duration_s: Option<Vec<f64>>,
        columns: BTreeMap<Quantity, Column>,
    ) -> Result<Self, BreathsError> {
        let n = end_s.len();
        if columns.values().any(|c| c.len() != n)
            || duration_s.as_ref().is_some_and(|d| d.len() != n)
        {
            return Err(BreathsError::Length);
        }
        for i in 0..n {
            if !end_s[i].is_finite() || (i > 0 && end_s[i] <= end_s[i - 1]) {
                return Err(BreathsError::Time(i));
            }
        }
        let step = |i: usize| {
            if i > 0 {
                end_s[i] - end_s[i - 1]
            } else if n > 1 {
                end_s[1] - end_s[0]
            } else {
                1.0
            }
        };
        let duration_s = (0..n)
            .map(|i| match &duration_s {
                Some(d) if d[i].is_finite() && d[i] > 0.0 => d[i],
                _ => step(i),
            })
            .collect();
        let columns = columns
            .into_iter()
            .map(|(q, c)| (q, c.into_iter().map(|v| v.filter(|x| x.is_finite())).collect()))
            .collect();
        Ok(Self { end_s, duration_s, columns })
    }

    /// Number of breaths.
    #[must_use]
    pub fn len(&self) -> usize {
        self.end_s.len()
    }

    /// Whether there is no breath.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        self.end_s.is_empty()
    }

    /// Ends of the breaths, s.
    #[must_use]
    pub fn end_s(&self) -> &[f64] {
        &self.end_s
    }

    /// Durations of the breaths, s.
    #[must_use]
    pub fn duration_s(&self) -> &[f64] {
        &self.duration_s
    }

    /// Middle of breath `i`, s.
    #[must_use]
    pub fn mid_s(&self, i: usize) -> f64 {
        self.end_s[i] - 0.5 * self.duration_s[i]
    }

    /// The column of `quantity`, if the table has one.
    #[must_use]
    pub fn column(&self, quantity: Quantity) -> Option<&[Option<f64>]> {
        self.columns.get(&quantity).map(Vec::as_slice)
    }

    /// Value of `quantity` at breath `i`.
    #[must_use]
    pub fn value(&self, quantity: Quantity, i: usize) -> Option<f64> {
        self.columns.get(&quantity).and_then(|c| c.get(i).copied().flatten())
    }

    /// The stored columns, in the order of the quantity table.
    pub fn columns(&self) -> impl Iterator<Item = (Quantity, &[Option<f64>])> {
        self.columns.iter().map(|(q, c)| (*q, c.as_slice()))
    }

    /// Whether any value of `quantity` is present.
    #[must_use]
    pub fn has(&self, quantity: Quantity) -> bool {
        self.columns.get(&quantity).is_some_and(|c| c.iter().any(Option::is_some))
    }

    /// Sets the column of `quantity`; a column of another length is ignored.
    pub(crate) fn set(&mut self, quantity: Quantity, column: Column) {
        if column.len() == self.len() {
            self.columns.insert(quantity, column);
        }
    }

    /// The same breaths with only the columns of `quantities`.
    #[must_use]
    pub fn only(&self, quantities: &[Quantity]) -> Self {
        let columns = self.columns.iter().filter(|(q, _)| quantities.contains(q));
        Self {
            end_s: self.end_s.clone(),
            duration_s: self.duration_s.clone(),
            columns: columns.map(|(q, c)| (*q, c.clone())).collect(),
        }
    }

    /// The same table without the column of `quantity`.
    #[must_use]
    pub fn without(&self, quantity: Quantity) -> Self {
        let mut copy = self.clone();
        copy.columns.remove(&quantity);
        copy
    }
}
