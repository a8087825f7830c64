//! Nine-coefficient polynomials of NASA/TP-2002-211556, each coefficient as printed. Made by `tests/data/species_tables.py`; a test
//! compares every digit with the data file beside it.

use super::{Coefficient, Shape, Species, SpeciesRange};

const ZERO: Coefficient = Coefficient::new(0, 0);

const fn d(mantissa: i64, exponent: i32) -> Coefficient {
    Coefficient::new(mantissa, exponent)
}

/// Ar.
pub static AR: Species<'static> = Species {
    name: "Ar",
    molar_mass: d(39_948, -6),
    shape: Shape::Atom,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [ZERO, ZERO, d(25, -1), ZERO, ZERO, ZERO, ZERO],
            enthalpy: d(-745_375, -3),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(2_010_538_475, -8),
                d(-599_266_107, -10),
                d(2_500_069_401, -9),
                d(-399_214_116, -16),
                d(120_527_214, -19),
                d(-1_819_015_576, -24),
                d(1_078_576_636, -28),
            ],
            enthalpy: d(-744_993_961, -6),
        },
        SpeciesRange {
            low: 6_000.0,
            high: 20_000.0,
            heat_capacity: [
                d(-995_126_508, 0),
                d(645_888_726, -3),
                d(-1_675_894_697, -7),
                d(2_319_933_363, -11),
                d(-1_721_080_911, -15),
                d(653_193_846, -19),
                d(-9_740_147_729, -25),
            ],
            enthalpy: d(-507_830_034, -2),
        },
    ],
};

/// H.
pub static H: Species<'static> = Species {
    name: "H",
    molar_mass: d(100_794, -8),
    shape: Shape::Atom,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [ZERO, ZERO, d(25, -1), ZERO, ZERO, ZERO, ZERO],
            enthalpy: d(2_547_370_801, -5),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(607_877_425, -7),
                d(-1_819_354_417, -10),
                d(2_500_211_817, -9),
                d(-1_226_512_864, -16),
                d(373_287_633, -19),
                d(-568_774_456, -23),
                d(3_410_210_197, -28),
            ],
            enthalpy: d(2_547_486_398, -5),
        },
        SpeciesRange {
            low: 6_000.0,
            high: 20_000.0,
            heat_capacity: [
                d(2_173_757_694, -1),
                d(-1_312_035_403, -4),
                d(33_991_742, -6),
                d(-381_399_968, -11),
                d(2_432_854_837, -16),
                d(-769_427_554, -20),
                d(964_410_563, -25),
            ],
            enthalpy: d(1_067_638_086, -3),
        },
    ],
};

/// He.
pub static HE: Species<'static> = Species {
    name: "He",
    molar_mass: d(4_002_602, -9),
    shape: Shape::Atom,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [ZERO, ZERO, d(25, -1), ZERO, ZERO, ZERO, ZERO],
            enthalpy: d(-745_375, -3),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [ZERO, ZERO, d(25, -1), ZERO, ZERO, ZERO, ZERO],
            enthalpy: d(-745_375, -3),
        },
        SpeciesRange {
            low: 6_000.0,
            high: 20_000.0,
            heat_capacity: [
                d(339_684_542, -2),
                d(-2_194_037_652, -6),
                d(3_080_231_878, -9),
                d(-806_895_755, -13),
                d(625_278_491, -17),
                d(-2_574_990_067, -22),
                d(4_429_960_218, -27),
            ],
            enthalpy: d(165_051_896, -4),
        },
    ],
};

/// Kr.
pub static KR: Species<'static> = Species {
    name: "Kr",
    molar_mass: d(838, -4),
    shape: Shape::Atom,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [ZERO, ZERO, d(25, -1), ZERO, ZERO, ZERO, ZERO],
            enthalpy: d(-745_375, -3),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(2_643_639_057, -7),
                d(-791_005_082, -9),
                d(2_500_920_585, -9),
                d(-532_816_411, -15),
                d(1_620_730_161, -19),
                d(-2_467_898_017, -23),
                d(147_858_504, -26),
            ],
            enthalpy: d(-740_348_894, -6),
        },
        SpeciesRange {
            low: 6_000.0,
            high: 20_000.0,
            heat_capacity: [
                d(-1_375_531_087, 0),
                d(906_403_053, -3),
                d(-2_403_481_435, -7),
                d(337_831_203, -10),
                d(-2_563_103_877, -15),
                d(996_978_779, -19),
                d(-1_521_249_677, -24),
            ],
            enthalpy: d(-711_166_737, -2),
        },
    ],
};

/// N.
pub static N: Species<'static> = Species {
    name: "N",
    molar_mass: d(140_067, -7),
    shape: Shape::Atom,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [ZERO, ZERO, d(25, -1), ZERO, ZERO, ZERO, ZERO],
            enthalpy: d(561_046_378, -4),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(887_650_138, -4),
                d(-10_712_315, -5),
                d(2_362_188_287, -9),
                d(2_916_720_081, -13),
                d(-17_295_151, -14),
                d(401_265_788, -19),
                d(-2_677_227_571, -24),
            ],
            enthalpy: d(569_735_133, -4),
        },
        SpeciesRange {
            low: 6_000.0,
            high: 20_000.0,
            heat_capacity: [
                d(547_518_105, 0),
                d(-310_757_498, -3),
                d(691_678_274, -7),
                d(-684_798_813, -11),
                d(38_275_724, -14),
                d(-1_098_367_709, -20),
                d(1_277_986_024, -25),
            ],
            enthalpy: d(2_550_585_618, -3),
        },
    ],
};

/// Ne.
pub static NE: Species<'static> = Species {
    name: "Ne",
    molar_mass: d(201_797, -7),
    shape: Shape::Atom,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [ZERO, ZERO, d(25, -1), ZERO, ZERO, ZERO, ZERO],
            enthalpy: d(-745_375, -3),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [ZERO, ZERO, d(25, -1), ZERO, ZERO, ZERO, ZERO],
            enthalpy: d(-745_375, -3),
        },
        SpeciesRange {
            low: 6_000.0,
            high: 20_000.0,
            heat_capacity: [
                d(-1_238_252_746, -2),
                d(695_857_958, -5),
                d(1_016_709_287, -9),
                d(1_424_664_555, -13),
                d(-480_393_393, -17),
                d(-1_170_213_183, -22),
                d(8_415_153_652, -27),
            ],
            enthalpy: d(-566_393_363, -4),
        },
    ],
};

/// O.
pub static O: Species<'static> = Species {
    name: "O",
    molar_mass: d(159_994, -7),
    shape: Shape::Atom,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [
                d(-79_536_113, -4),
                d(1_607_177_787, -7),
                d(1_966_226_438, -9),
                d(101_367_031, -11),
                d(-1_110_415_423, -15),
                d(65_175_075, -17),
                d(-1_584_779_251, -22),
            ],
            enthalpy: d(2_840_362_437, -5),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(2_619_020_262, -4),
                d(-729_872_203, -6),
                d(331_717_727, -8),
                d(-428_133_436, -12),
                d(1_036_104_594, -16),
                d(-943_830_433, -20),
                d(2_725_038_297, -25),
            ],
            enthalpy: d(339_242_806, -4),
        },
        SpeciesRange {
            low: 6_000.0,
            high: 20_000.0,
            heat_capacity: [
                d(1_779_004_264, -1),
                d(-1_082_328_257, -4),
                d(2_810_778_365, -8),
                d(-2_975_232_262, -12),
                d(1_854_997_534, -16),
                d(-579_623_154, -20),
                d(7_191_720_164, -26),
            ],
            enthalpy: d(889_094_263, -3),
        },
    ],
};

/// Xe.
pub static XE: Species<'static> = Species {
    name: "Xe",
    molar_mass: d(131_293, -6),
    shape: Shape::Atom,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [ZERO, ZERO, d(25, -1), ZERO, ZERO, ZERO, ZERO],
            enthalpy: d(-745_375, -3),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(402_522_668, -5),
                d(-1_209_507_521, -8),
                d(2_514_153_347, -9),
                d(-824_810_208, -14),
                d(2_530_232_618, -18),
                d(-389_233_323, -21),
                d(2_360_439_138, -26),
            ],
            enthalpy: d(-668_580_073, -6),
        },
        SpeciesRange {
            low: 6_000.0,
            high: 20_000.0,
            heat_capacity: [
                d(2_540_397_456, -1),
                d(-1_105_373_774, -4),
                d(1_382_644_099, -8),
                d(1_500_614_606, -12),
                d(-393_535_903, -15),
                d(2_765_790_584, -20),
                d(-5_943_990_574, -25),
            ],
            enthalpy: d(928_544_383, -3),
        },
    ],
};

/// CO.
pub static CO: Species<'static> = Species {
    name: "CO",
    molar_mass: d(280_101, -7),
    shape: Shape::Linear,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [
                d(1_489_045_326, -5),
                d(-2_922_285_939, -7),
                d(572_452_717, -8),
                d(-817_623_503, -11),
                d(1_456_903_469, -14),
                d(-1_087_746_302, -17),
                d(3_027_941_827, -21),
            ],
            enthalpy: d(-1_303_131_878, -5),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(461_919_725, -3),
                d(-1_944_704_863, -6),
                d(591_671_418, -8),
                d(-566_428_283, -12),
                d(139_881_454, -15),
                d(-1_787_680_361, -20),
                d(962_093_557, -24),
            ],
            enthalpy: d(-2_466_261_084, -6),
        },
        SpeciesRange {
            low: 6_000.0,
            high: 20_000.0,
            heat_capacity: [
                d(886_866_296, 0),
                d(-750_037_784, -3),
                d(2_495_474_979, -7),
                d(-39_563_511, -9),
                d(329_777_208, -14),
                d(-1_318_409_933, -19),
                d(1_998_937_948, -24),
            ],
            enthalpy: d(570_142_113, -2),
        },
    ],
};

/// CO2.
pub static CO2: Species<'static> = Species {
    name: "CO2",
    molar_mass: d(440_095, -7),
    shape: Shape::Linear,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [
                d(494_365_054, -4),
                d(-626_411_601, -6),
                d(530_172_524, -8),
                d(2_503_813_816, -12),
                d(-2_127_308_728, -16),
                d(-768_998_878, -18),
                d(2_849_677_801, -22),
            ],
            enthalpy: d(-452_819_846, -4),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(1_176_962_419, -4),
                d(-1_788_791_477, -6),
                d(829_152_319, -8),
                d(-922_315_678, -13),
                d(486_367_688, -17),
                d(-1_891_053_312, -21),
                d(633_003_659, -24),
            ],
            enthalpy: d(-390_835_059, -4),
        },
        SpeciesRange {
            low: 6_000.0,
            high: 20_000.0,
            heat_capacity: [
                d(-1_544_423_287, 0),
                d(1_016_847_056, -3),
                d(-256_140_523, -6),
                d(336_940_108, -10),
                d(-2_181_184_337, -15),
                d(699_142_084, -19),
                d(-88_423_515, -23),
            ],
            enthalpy: d(-804_321_451, -2),
        },
    ],
};

/// C2H2.
pub static C2H2: Species<'static> = Species {
    name: "C2H2",
    molar_mass: d(2_603_728, -8),
    shape: Shape::Linear,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [
                d(1_598_112_089, -4),
                d(-2_216_644_118, -6),
                d(1_265_707_813, -8),
                d(-797_965_108, -11),
                d(805_499_275, -14),
                d(-2_433_307_673, -18),
                d(-752_923_318, -22),
            ],
            enthalpy: d(371_261_906, -4),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(171_384_741, -2),
                d(-592_910_666, -5),
                d(1_236_127_943, -8),
                d(1_314_186_993, -13),
                d(-1_362_764_431, -16),
                d(2_712_655_786, -20),
                d(-1_302_066_204, -24),
            ],
            enthalpy: d(626_657_897, -4),
        },
    ],
};

/// D2.
pub static D2: Species<'static> = Species {
    name: "D2",
    molar_mass: d(4_028_204, -9),
    shape: Shape::Linear,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [
                d(2_125_790_482, -5),
                d(-2_996_945_907, -7),
                d(513_031_498, -8),
                d(-417_297_089, -11),
                d(501_434_572, -14),
                d(-2_126_389_969, -18),
                d(2_386_536_969, -22),
            ],
            enthalpy: d(39_449_859, -5),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(821_516_856, -3),
                d(-2_365_623_159, -6),
                d(534_297_451, -8),
                d(692_814_599, -13),
                d(-852_367_102, -16),
                d(2_456_447_415, -20),
                d(-1_960_597_698, -24),
            ],
            enthalpy: d(1_434_214_587, -5),
        },
        SpeciesRange {
            low: 6_000.0,
            high: 20_000.0,
            heat_capacity: [
                d(489_984_874, 0),
                d(-3_112_892_916, -4),
                d(794_596_134, -7),
                d(-842_582_874, -11),
                d(478_945_802, -15),
                d(-1_390_917_969, -20),
                d(1_637_606_941, -25),
            ],
            enthalpy: d(2_460_108_052, -3),
        },
    ],
};

/// H2.
pub static H2: Species<'static> = Species {
    name: "H2",
    molar_mass: d(201_588, -8),
    shape: Shape::Linear,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [
                d(407_832_321, -4),
                d(-800_918_604, -6),
                d(821_470_201, -8),
                d(-1_269_714_457, -11),
                d(1_753_605_076, -14),
                d(-120_286_027, -16),
                d(336_809_349, -20),
            ],
            enthalpy: d(2_682_484_665, -6),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(560_812_801, -3),
                d(-837_150_474, -6),
                d(2_975_364_532, -9),
                d(1_252_249_124, -12),
                d(-374_071_619, -15),
                d(59_366_252, -18),
                d(-36_069_941, -22),
            ],
            enthalpy: d(533_982_441, -5),
        },
        SpeciesRange {
            low: 6_000.0,
            high: 20_000.0,
            heat_capacity: [
                d(496_688_412, 0),
                d(-3_147_547_149, -4),
                d(798_412_188, -7),
                d(-841_478_921, -11),
                d(475_324_835, -15),
                d(-1_371_873_492, -20),
                d(1_605_461_756, -25),
            ],
            enthalpy: d(2_488_433_516, -3),
        },
    ],
};

/// HD.
pub static HD: Species<'static> = Species {
    name: "HD",
    molar_mass: d(3_022_042, -9),
    shape: Shape::Linear,
    ranges: &[
        SpeciesRange {
            low: 298.15,
            high: 1_000.0,
            heat_capacity: [
                d(2_519_120_338, -5),
                d(-2_761_004_999, -7),
                d(464_444_129, -8),
                d(-2_082_376_844, -12),
                d(1_418_070_803, -15),
                d(2_839_893_835, -19),
                d(-320_233_103, -21),
            ],
            enthalpy: d(391_361_643, -6),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(845_583, 0),
                d(-1_956_578_537, -6),
                d(440_437_387, -8),
                d(575_168_109, -12),
                d(-2_131_983_152, -16),
                d(403_612_668, -19),
                d(-2_727_170_705, -24),
            ],
            enthalpy: d(1_227_254_163, -5),
        },
        SpeciesRange {
            low: 6_000.0,
            high: 20_000.0,
            heat_capacity: [
                d(482_996_094, 0),
                d(-3_077_144_916, -4),
                d(786_481_651, -7),
                d(-833_299_091, -11),
                d(473_225_411, -15),
                d(-1_372_721_571, -20),
                d(1_614_120_677, -25),
            ],
            enthalpy: d(2_431_070_386, -3),
        },
    ],
};

/// N2.
pub static N2: Species<'static> = Species {
    name: "N2",
    molar_mass: d(280_134, -7),
    shape: Shape::Linear,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [
                d(2_210_371_497, -5),
                d(-381_846_182, -6),
                d(608_273_836, -8),
                d(-853_091_441, -11),
                d(1_384_646_189, -14),
                d(-962_579_362, -17),
                d(2_519_705_809, -21),
            ],
            enthalpy: d(710_846_086, -6),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(587_712_406, -3),
                d(-2_239_249_073, -6),
                d(606_694_922, -8),
                d(-61_396_855, -11),
                d(1_491_806_679, -16),
                d(-1_923_105_485, -20),
                d(1_061_954_386, -24),
            ],
            enthalpy: d(1_283_210_415, -5),
        },
        SpeciesRange {
            low: 6_000.0,
            high: 20_000.0,
            heat_capacity: [
                d(831_013_916, 0),
                d(-642_073_354, -3),
                d(2_020_264_635, -7),
                d(-3_065_092_046, -11),
                d(2_486_903_333, -15),
                d(-970_595_411, -19),
                d(1_437_538_881, -24),
            ],
            enthalpy: d(493_870_704, -2),
        },
    ],
};

/// N2O.
pub static N2O: Species<'static> = Species {
    name: "N2O",
    molar_mass: d(440_128, -7),
    shape: Shape::Linear,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [
                d(428_822_597, -4),
                d(-644_011_844, -6),
                d(603_435_143, -8),
                d(2_265_394_436, -13),
                d(347_278_285, -14),
                d(-362_774_864, -17),
                d(1_137_969_552, -21),
            ],
            enthalpy: d(1_179_405_506, -5),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(343_844_804, -3),
                d(-2_404_557_558, -6),
                d(912_563_622, -8),
                d(-540_166_793, -12),
                d(1_315_124_031, -16),
                d(-14_142_151, -18),
                d(638_106_687, -24),
            ],
            enthalpy: d(2_198_632_638, -5),
        },
    ],
};

/// NO.
pub static NO: Species<'static> = Species {
    name: "NO",
    molar_mass: d(300_061, -7),
    shape: Shape::Linear,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [
                d(-1_143_916_503, -5),
                d(1_536_467_592, -7),
                d(343_146_873, -8),
                d(-2_668_592_368, -12),
                d(848_139_912, -14),
                d(-768_511_105, -17),
                d(2_386_797_655, -21),
            ],
            enthalpy: d(909_821_441, -5),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(2_239_018_716, -4),
                d(-1_289_651_623, -6),
                d(543_393_603, -8),
                d(-36_560_349, -11),
                d(988_096_645, -16),
                d(-1_416_076_856, -20),
                d(938_018_462, -24),
            ],
            enthalpy: d(1_750_317_656, -5),
        },
        SpeciesRange {
            low: 6_000.0,
            high: 20_000.0,
            heat_capacity: [
                d(-957_530_354, 0),
                d(591_243_448, -3),
                d(-1_384_566_826, -7),
                d(1_694_339_403, -11),
                d(-1_007_351_096, -15),
                d(2_912_584_076, -20),
                d(-329_510_935, -24),
            ],
            enthalpy: d(-467_750_124, -2),
        },
    ],
};

/// O2.
pub static O2: Species<'static> = Species {
    name: "O2",
    molar_mass: d(319_988, -7),
    shape: Shape::Linear,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [
                d(-342_556_342, -4),
                d(484_700_097, -6),
                d(1_119_010_961, -9),
                d(429_388_924, -11),
                d(-683_630_052, -15),
                d(-20_233_727, -16),
                d(1_039_040_018, -21),
            ],
            enthalpy: d(-339_145_487, -5),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(-1_037_939_022, -3),
                d(2_344_830_282, -6),
                d(1_819_732_036, -9),
                d(1_267_847_582, -12),
                d(-2_188_067_988, -16),
                d(2_053_719_572, -20),
                d(-819_346_705, -24),
            ],
            enthalpy: d(-1_689_010_929, -5),
        },
        SpeciesRange {
            low: 6_000.0,
            high: 20_000.0,
            heat_capacity: [
                d(49_752_943, 1),
                d(-2_866_106_874, -4),
                d(669_035_225, -7),
                d(-616_995_902, -11),
                d(3_016_396_027, -16),
                d(-74_214_166, -19),
                d(727_817_577, -25),
            ],
            enthalpy: d(2_293_554_027, -3),
        },
    ],
};

/// OH.
pub static OH: Species<'static> = Species {
    name: "OH",
    molar_mass: d(1_700_734, -8),
    shape: Shape::Linear,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [
                d(-199_885_899, -5),
                d(930_013_616, -7),
                d(3_050_854_229, -9),
                d(1_529_529_288, -12),
                d(-3_157_890_998, -15),
                d(331_544_618, -17),
                d(-1_138_762_683, -21),
            ],
            enthalpy: d(2_991_214_235, -6),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(1_017_393_379, -3),
                d(-2_509_957_276, -6),
                d(511_654_786, -8),
                d(130_529_993, -12),
                d(-828_432_226, -16),
                d(2_006_475_941, -20),
                d(-1_556_993_656, -24),
            ],
            enthalpy: d(2_019_640_206, -5),
        },
        SpeciesRange {
            low: 6_000.0,
            high: 20_000.0,
            heat_capacity: [
                d(2_847_234_193, -1),
                d(-1_859_532_612, -4),
                d(50_082_409, -6),
                d(-514_237_498, -11),
                d(2_875_536_589, -16),
                d(-822_881_796, -20),
                d(956_722_902, -25),
            ],
            enthalpy: d(1_468_393_908, -3),
        },
    ],
};

/// CF4.
pub static CF4: Species<'static> = Species {
    name: "CF4",
    molar_mass: d(880_043_128, -10),
    shape: Shape::Other,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [
                d(98_174_585, -4),
                d(1_163_343_483, -7),
                d(-1_288_338_636, -9),
                d(395_956_691, -10),
                d(-499_624_421, -13),
                d(3_125_339_346, -17),
                d(-784_170_032, -20),
            ],
            enthalpy: d(-1_138_502_297, -4),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(-416_445_678, -3),
                d(-1_414_797_167, -6),
                d(1_405_124_837, -8),
                d(-419_909_386, -12),
                d(927_892_161, -16),
                d(-106_457_583, -19),
                d(493_709_968, -24),
            ],
            enthalpy: d(-1_094_691_149, -4),
        },
    ],
};

/// CH4.
pub static CH4: Species<'static> = Species {
    name: "CH4",
    molar_mass: d(1_604_246, -8),
    shape: Shape::Other,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [
                d(-1_766_850_998, -4),
                d(278_618_102, -5),
                d(-120_257_785, -7),
                d(391_761_929, -10),
                d(-361_905_443, -13),
                d(2_026_853_043, -17),
                d(-497_670_549, -20),
            ],
            enthalpy: d(-233_131_436, -4),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(373_004_276, -2),
                d(-1_383_501_485, -5),
                d(2_049_107_091, -8),
                d(-1_961_974_759, -12),
                d(472_731_304, -15),
                d(-372_881_469, -19),
                d(1_623_737_207, -24),
            ],
            enthalpy: d(753_206_691, -4),
        },
    ],
};

/// C2H4.
pub static C2H4: Species<'static> = Species {
    name: "C2H4",
    molar_mass: d(2_805_316, -8),
    shape: Shape::Other,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [
                d(-1_163_605_836, -4),
                d(255_485_151, -5),
                d(-1_609_746_428, -8),
                d(662_577_932, -10),
                d(-788_508_186, -13),
                d(512_522_482, -16),
                d(-1_370_340_031, -20),
            ],
            enthalpy: d(-617_619_107, -5),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(340_876_367, -2),
                d(-1_374_847_903, -5),
                d(2_365_898_074, -8),
                d(-2_423_804_419, -12),
                d(443_139_566, -15),
                d(-435_268_339, -19),
                d(1_775_410_633, -24),
            ],
            enthalpy: d(882_042_938, -4),
        },
    ],
};

/// C2H6.
pub static C2H6: Species<'static> = Species {
    name: "C2H6",
    molar_mass: d(3_006_904, -8),
    shape: Shape::Other,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [
                d(-1_862_044_161, -4),
                d(340_619_186, -5),
                d(-1_951_705_092, -8),
                d(756_583_559, -10),
                d(-820_417_322, -13),
                d(50_611_358, -15),
                d(-1_319_281_992, -20),
            ],
            enthalpy: d(-270_293_289, -4),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(502_578_213, -2),
                d(-2_033_022_397, -5),
                d(332_255_293, -7),
                d(-383_670_341, -11),
                d(723_840_586, -15),
                d(-73_191_825, -18),
                d(3_065_468_699, -24),
            ],
            enthalpy: d(111_596_395, -3),
        },
    ],
};

/// C3H8.
pub static C3H8: Species<'static> = Species {
    name: "C3H8",
    molar_mass: d(4_409_562, -8),
    shape: Shape::Other,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [
                d(-2_433_144_337, -4),
                d(465_627_081, -5),
                d(-2_939_466_091, -8),
                d(1_188_952_745, -10),
                d(-1_376_308_269, -13),
                d(881_482_391, -16),
                d(-2_342_987_994, -20),
            ],
            enthalpy: d(-354_033_527, -4),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(642_073_168, -2),
                d(-2_659_791_134, -5),
                d(453_435_684, -7),
                d(-502_066_392, -11),
                d(947_121_694, -15),
                d(-957_540_523, -19),
                d(400_967_288, -23),
            ],
            enthalpy: d(1_455_582_459, -4),
        },
    ],
};

/// H2O.
pub static H2O: Species<'static> = Species {
    name: "H2O",
    molar_mass: d(1_801_528, -8),
    shape: Shape::Other,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [
                d(-394_796_083, -4),
                d(575_573_102, -6),
                d(931_782_653, -9),
                d(722_271_286, -11),
                d(-734_255_737, -14),
                d(495_504_349, -17),
                d(-1_336_933_246, -21),
            ],
            enthalpy: d(-330_397_431, -4),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(1_034_972_096, -3),
                d(-2_412_698_562, -6),
                d(464_611_078, -8),
                d(2_291_998_307, -12),
                d(-683_683_048, -15),
                d(942_646_893, -19),
                d(-482_238_053, -23),
            ],
            enthalpy: d(-1_384_286_509, -5),
        },
    ],
};

/// NH3.
pub static NH3: Species<'static> = Species {
    name: "NH3",
    molar_mass: d(1_703_052, -8),
    shape: Shape::Other,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [
                d(-768_122_615, -4),
                d(1_270_951_578, -6),
                d(-389_322_913, -8),
                d(2_145_988_418, -11),
                d(-2_183_766_703, -14),
                d(1_317_385_706, -17),
                d(-333_232_206, -20),
            ],
            enthalpy: d(-1_264_886_413, -5),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(2_452_389_535, -3),
                d(-804_089_424, -5),
                d(1_271_346_201, -8),
                d(-398_018_658, -12),
                d(355_250_275, -16),
                d(253_092_357, -20),
                d(-332_270_053, -24),
            ],
            enthalpy: d(438_619_196, -4),
        },
    ],
};

/// NO2.
pub static NO2: Species<'static> = Species {
    name: "NO2",
    molar_mass: d(460_055, -7),
    shape: Shape::Other,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [
                d(-564_203_878, -4),
                d(963_308_572, -6),
                d(-2_434_510_974, -9),
                d(1_927_760_886, -11),
                d(-1_874_559_328, -14),
                d(914_549_773, -17),
                d(-1_777_647_635, -21),
            ],
            enthalpy: d(-1_547_925_037, -6),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(721_300_157, -3),
                d(-38_326_152, -4),
                d(1_113_963_285, -8),
                d(-2_238_062_246, -12),
                d(654_772_343, -15),
                d(-76_113_359, -18),
                d(332_836_105, -23),
            ],
            enthalpy: d(2_502_497_403, -5),
        },
    ],
};

/// SF6.
pub static SF6: Species<'static> = Species {
    name: "SF6",
    molar_mass: d(1_460_554_192, -10),
    shape: Shape::Other,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [
                d(330_952_674, -3),
                d(-473_768_505, -5),
                d(2_247_738_068, -8),
                d(1_046_954_309, -11),
                d(-2_560_641_961, -14),
                d(2_153_716_967, -17),
                d(-651_609_896, -20),
            ],
            enthalpy: d(-1_255_360_583, -4),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(-73_067_265, -2),
                d(-636_705_655, -6),
                d(1_947_442_853, -8),
                d(-1_894_325_671, -13),
                d(417_872_283, -16),
                d(-478_374_495, -20),
                d(2_213_516_129, -25),
            ],
            enthalpy: d(-1_510_609_837, -4),
        },
    ],
};

/// SO2.
pub static SO2: Species<'static> = Species {
    name: "SO2",
    molar_mass: d(640_638, -7),
    shape: Shape::Other,
    ranges: &[
        SpeciesRange {
            low: 200.0,
            high: 1_000.0,
            heat_capacity: [
                d(-531_084_214, -4),
                d(909_031_167, -6),
                d(-2_356_891_244, -9),
                d(2_204_449_885, -11),
                d(-2_510_781_471, -14),
                d(1_446_300_484, -17),
                d(-336_907_094, -20),
            ],
            enthalpy: d(-411_375_208, -4),
        },
        SpeciesRange {
            low: 1_000.0,
            high: 6_000.0,
            heat_capacity: [
                d(-1_127_640_116, -4),
                d(-825_226_138, -6),
                d(761_617_863, -8),
                d(-199_932_761, -12),
                d(565_563_143, -16),
                d(-545_431_661, -20),
                d(2_918_294_102, -25),
            ],
            enthalpy: d(-335_130_869, -4),
        },
    ],
};

/// Every species of the table, by name.
pub static ALL: [&Species<'static>; 29] = [
    &AR, &C2H2, &C2H4, &C2H6, &C3H8, &CF4, &CH4, &CO, &CO2, &D2, &H, &H2, &H2O, &HD, &HE, &KR, &N, &N2, &N2O, &NH3, &NO, &NO2, &NE, &O,
    &O2, &OH, &SF6, &SO2, &XE,
];
