//! Floor 4: what the tube does with the shock.
mod bifurcation;
mod boundary_layer;
mod event;
mod input;
mod load;
mod test_time;
mod viscosity;
mod wave_diagram;
mod waves;
pub use bifurcation::{Bifurcation, BifurcationBand, BifurcationError, Verdict, bifurcation_band};
pub use boundary_layer::{BoundaryLayer, Separation, TestTimeBand, laminar_separation, turbulent_separation};
pub use event::{Event, Wave, WaveName};
pub use input::{TubeInput, TubeInputError};
pub use load::{EndLoad, RatingCheck, StoredEnergy, check_rating, end_load, stored_energy};
pub use test_time::{Limit, TestTime};
pub use viscosity::{LennardJones, ViscosityError, collision_integral, lennard_jones, mixture_viscosity, wilke};
pub use wave_diagram::WaveDiagram;
pub use waves::{ContactReturn, Lengths, Tube, TubeSpeeds};
