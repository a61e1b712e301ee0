//! Stream tubes evaluated several at once are what they are one by one.

use approx::assert_relative_eq;
use axirad::discretise::layout::Layout;
use axirad::discretise::profile::Profile;
use axirad::discretise::tubes::{TubeRoom, Tubes};
use axirad::simulate::read_spec;

#[test]
fn tubes_side_by_side_are_what_they_are_one_by_one() {
    let name = "specs/cases/case_c.yaml";
    let bytes = std::fs::read(name).expect("the case is there");
    let mut read = |part: &str| std::fs::read(part).map_err(|error| error.to_string());
    // 13 tubes leave lanes over
    let spec = read_spec(name, &bytes, &mut read, &["numerics.stream_tubes=13".to_owned()]).expect("a valid spec");
    let material = &spec.plant.material;
    let layout = Layout::new(material, 13);
    let mut state = layout.uniform(&spec.plant.feed.state);
    for (i, value) in state.iter_mut().enumerate() {
        *value *= 1.0 - 1e-3 * (i % 97) as f64;
    }
    let flows = vec![1e-6; 13];
    let tubes = Tubes { material, layout: &layout, flows: &flows, state: &state };
    let mut room = TubeRoom::new(material);
    let [mut fast, mut plain] = [Profile::new(material, &layout), Profile::new(material, &layout)];
    tubes.evaluate(&mut room, &mut fast);
    tubes.one_by_one(&mut room, &mut plain);
    // a handful of exponentials, each good to three units in the last place, with exponents up to 40
    for (a, b) in fast.sources.iter().zip(&plain.sources).chain(fast.viscosities.iter().zip(&plain.viscosities)) {
        assert_relative_eq!(a, b, max_relative = 1e-13);
    }
    for (a, b) in fast.transport.iter().zip(&plain.transport) {
        assert_relative_eq!(a, b, max_relative = 1e-14);
    }
}
