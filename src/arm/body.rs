use crate::geometry::{M3, V3};
use crate::units::{Fault, Field};

/// Grounds say where a datum comes from.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Grounds {
    /// The maker's sheet.
    #[default]
    Sheet,
    /// Fitted from readings of the real arm.
    Weighed,
    /// Somebody's guess: it never yields `clear`.
    Guess,
}

/// A body is a rigid mass: a link, a tool or a load.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Body {
    /// Mass, kg.
    pub mass: f64,
    /// Centre of mass in its own coordinate system, m.
    pub com: V3,
    /// Inertia tensor about the centre of mass, in axes parallel to its own coordinate system, kg·m².
    pub inertia: Option<M3>,
    /// Where the figures come from.
    pub grounds: Grounds,
}

impl Body {
    /// A tensor from its elements xx yy zz xy xz yz (elements of the tensor, so the signs of products are as they stand in it).
    pub fn tensor([xx, yy, zz, xy, xz, yz]: [f64; 6]) -> M3 {
        M3::new(xx, xy, xz, xy, yy, yz, xz, yz, zz)
    }

    /// What is not physical about this body, told of `thing` ("joint J3: link"): a mass below 0, a number that is none, a tensor
    /// that is not positive semi-definite or breaks the triangle inequality of principal moments.
    pub fn faults(&self, field: &Field, thing: &str) -> Vec<Fault> {
        let mut faults = Vec::new();
        if !(self.mass.is_finite() && self.mass >= 0.0) {
            faults.push(Fault::new(field.key("mass"), format!("{thing}: mass is {} kg; it must be 0 or more", self.mass)));
        }
        if !self.com.iter().all(|v| v.is_finite()) {
            faults.push(Fault::new(field.key("com"), format!("{thing}: com holds something that is not a number")));
        }
        if let Some(says) = self.inertia.and_then(|tensor| unphysical(&tensor)) {
            faults.push(Fault::new(field.key("inertia"), format!("{thing}: {says}")));
        }
        faults
    }
}

/// Share of the largest principal moment by which a tensor may miss a physical law, for tensors rounded on a sheet.
const TENSOR_SLACK: f64 = 1e-3;

fn unphysical(tensor: &M3) -> Option<String> {
    if !tensor.iter().all(|v| v.is_finite()) {
        return Some("inertia holds something that is not a number".to_owned());
    }
    let mut moments: [f64; 3] = tensor.symmetric_eigenvalues().into();
    moments.sort_by(f64::total_cmp);
    let [least, middle, most] = moments;
    let slack = TENSOR_SLACK * most.abs();
    if least < -slack {
        return Some(format!("inertia has a principal moment of {least:.4} kg·m²; it must be 0 or more"));
    }
    if most > least + middle + slack {
        return Some(format!(
            "inertia has principal moments {least:.4}, {middle:.4}, {most:.4} kg·m²; the largest must not exceed the sum of the \
             other two, {:.4}",
            least + middle
        ));
    }
    None
}

#[cfg(test)]
mod tests {
    use super::*;

    fn body(mass: f64, elements: [f64; 6]) -> Body {
        Body { mass, com: V3::zeros(), inertia: Some(Body::tensor(elements)), grounds: Grounds::Sheet }
    }

    #[test]
    fn a_physical_body_has_no_faults_and_an_impossible_one_is_told() {
        let says = |b: Body| b.faults(&Field::top(), "link").into_iter().map(|f| f.says).collect::<Vec<_>>().join("; ");
        assert_eq!(says(body(2.0, [1.0, 1.0, 1.9, 0.0, 0.0, 0.0])), "");
        assert!(says(body(2.0, [1.0, 1.0, 2.1, 0.0, 0.0, 0.0])).contains("sum of the other two, 2.0000"));
        assert!(says(body(2.0, [1.0, 1.0, 1.0, 1.2, 0.0, 0.0])).contains("principal moment of -0.2000"));
        assert!(says(body(-2.0, [1.0; 6])).contains("mass is -2 kg"));
        assert!(says(body(f64::NAN, [f64::NAN; 6])).contains("mass is NaN"));
    }
}
