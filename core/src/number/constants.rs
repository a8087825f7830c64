//! Constants of the series for logarithm and exponential, as pairs of doubles good to 2⁻¹⁰⁶ of their value; a tail of zero says that the head is exact. A test derives each of them again from
//! whole numbers.

/// head + tail from the bits of both.
const fn pair(head: u64, tail: u64) -> (f64, f64) {
    (f64::from_bits(head), f64::from_bits(tail))
}

/// ln 2.
pub(super) const LN_2: (f64, f64) = pair(0x3fe6_2e42_fefa_39ef, 0x3c7a_bc9e_3b39_803f);

/// 1/(2n + 1), n = 0 … 7: artanh(s)/s in powers of s².
pub(super) const ODD: [(f64, f64); 8] = [
    pair(0x3ff0_0000_0000_0000, 0x0000_0000_0000_0000),
    pair(0x3fd5_5555_5555_5555, 0x3c75_5555_5555_5555),
    pair(0x3fc9_9999_9999_999a, 0xbc69_9999_9999_999a),
    pair(0x3fc2_4924_9249_2492, 0x3c62_4924_9249_2492),
    pair(0x3fbc_71c7_1c71_c71c, 0x3c5c_71c7_1c71_c71c),
    pair(0x3fb7_45d1_745d_1746, 0xbc47_45d1_745d_1746),
    pair(0x3fb3_b13b_13b1_3b14, 0xbc53_b13b_13b1_3b14),
    pair(0x3fb1_1111_1111_1111, 0x3c31_1111_1111_1111),
];

/// 1/n!, n = 0 … 6.
pub(super) const FACTORIAL: [(f64, f64); 7] = [
    pair(0x3ff0_0000_0000_0000, 0x0000_0000_0000_0000),
    pair(0x3ff0_0000_0000_0000, 0x0000_0000_0000_0000),
    pair(0x3fe0_0000_0000_0000, 0x0000_0000_0000_0000),
    pair(0x3fc5_5555_5555_5555, 0x3c65_5555_5555_5555),
    pair(0x3fa5_5555_5555_5555, 0x3c45_5555_5555_5555),
    pair(0x3f81_1111_1111_1111, 0x3c01_1111_1111_1111),
    pair(0x3f56_c16c_16c1_6c17, 0xbbef_49f4_9f49_f49f),
];

/// ln(1 + (2i + 1)/128), i = 0 … 63.
pub(super) const LOGARITHM: [(f64, f64); 64] = [
    pair(0x3f7f_e02a_6b10_6789, 0xbbce_44b7_e371_1ebf),
    pair(0x3f97_b91b_07d5_b11b, 0xbc35_b602_ace3_a510),
    pair(0x3fa3_9e87_b9fe_bd60, 0xbc45_bfa9_37f5_51bb),
    pair(0x3fab_42dd_7119_71bf, 0xbc3e_b975_9c13_0499),
    pair(0x3fb1_6536_eea3_7ae1, 0xbc37_9da3_e8c2_2cda),
    pair(0x3fb5_1b07_3f06_183f, 0x3c5a_49e3_9a1a_8be4),
    pair(0x3fb8_c345_d631_9b21, 0xbc24_a697_ab34_24a9),
    pair(0x3fbc_5e54_8f5b_c743, 0x3c35_d617_ef81_61b1),
    pair(0x3fbf_ec91_31db_eabb, 0xbc55_746b_9981_b36c),
    pair(0x3fc1_b72a_d52f_67a0, 0x3c54_8302_3472_cd74),
    pair(0x3fc3_71fc_201e_8f74, 0x3c5d_e6cb_62af_18a0),
    pair(0x3fc5_26e5_e3a1_b438, 0xbc67_46ff_8a47_0d3a),
    pair(0x3fc6_d60f_e719_d21d, 0xbc6c_aae2_68ec_d179),
    pair(0x3fc8_7fa0_6520_c911, 0xbc6b_f7fd_bfa0_8d9a),
    pair(0x3fca_23bc_1fe2_b563, 0x3c49_3711_b07a_998c),
    pair(0x3fcb_c286_742d_8cd6, 0x3c54_fce7_4487_0f55),
    pair(0x3fcd_5c21_6b4f_bb91, 0x3c66_e443_597e_4d40),
    pair(0x3fce_f0ad_cbdc_5936, 0x3c64_8637_950d_c20d),
    pair(0x3fd0_4025_94b4_d041, 0xbc62_8ec2_17a5_022d),
    pair(0x3fd1_058b_f9ae_4ad5, 0x3c58_9fa0_ab4c_b31d),
    pair(0x3fd1_c898_c169_99fb, 0xbc30_e5c6_2aff_1c44),
    pair(0x3fd2_895a_13de_86a3, 0x3c77_ad24_c13f_040e),
    pair(0x3fd3_47dd_9a98_7d55, 0xbc64_dd4c_5809_19f8),
    pair(0x3fd4_0430_8686_a7e4, 0xbc70_bcfb_6082_ce6d),
    pair(0x3fd4_be5f_9577_78a1, 0xbc62_59b3_5b04_813d),
    pair(0x3fd5_7677_1745_5a6c, 0x3c75_26ad_b283_660c),
    pair(0x3fd6_2c82_f2b9_c795, 0x3c67_b7af_9153_00e5),
    pair(0x3fd6_e08e_aa2b_a1e4, 0xbc7c_fb1b_39ca_3a0f),
    pair(0x3fd7_92a5_5fdd_47a2, 0x3c7f_0576_91fe_9ed7),
    pair(0x3fd8_42d1_da1e_8b17, 0x3c72_4ec5_1978_4676),
    pair(0x3fd8_f11e_8736_62c7, 0x3c7f_85da_755a_61a3),
    pair(0x3fd9_9d95_8117_e08b, 0xbc6a_2b68_89dc_3e72),
    pair(0x3fda_4840_90e5_bb0a, 0x3c65_fe53_5b87_5a75),
    pair(0x3fda_f129_3247_786b, 0x3c51_3384_4a15_dc28),
    pair(0x3fdb_9858_9693_10fb, 0x3c76_63ec_53e2_3bc4),
    pair(0x3fdc_3dd7_a7cd_ad4d, 0x3c7c_ecf0_52de_a69b),
    pair(0x3fdc_e1af_0b85_f3eb, 0x3c7e_df4a_f2ab_4267),
    pair(0x3fdd_83e7_258a_2f3e, 0x3c74_1456_e8bb_2511),
    pair(0x3fde_2488_1a7c_6c26, 0x3c5c_bd8f_4595_4a46),
    pair(0x3fde_c399_d246_8cc0, 0x3c57_5cee_53f3_5397),
    pair(0x3fdf_6123_fa70_28ac, 0x3c78_515b_0f2d_b341),
    pair(0x3fdf_fd2e_0857_f498, 0x3c75_65f4_0d93_21af),
    pair(0x3fe0_4bdf_9da9_26d2, 0x3c89_7f30_4022_c9df),
    pair(0x3fe0_986f_4f57_3521, 0xbc81_b809_5ac0_2f01),
    pair(0x3fe0_e449_85d1_cc8c, 0xbc52_2a34_42d2_d384),
    pair(0x3fe1_2f71_9593_efbc, 0x3c84_c048_c671_f435),
    pair(0x3fe1_79ea_bbd8_99a1, 0xbc80_0e7c_6417_e0b4),
    pair(0x3fe1_c3b8_1f71_3c25, 0xbc80_dac1_c4c8_10e9),
    pair(0x3fe2_0cdc_d192_ab6e, 0xbc8b_2bf0_bc22_9014),
    pair(0x3fe2_555b_ce98_f7cb, 0x3c7e_021d_6d68_81e7),
    pair(0x3fe2_9d37_fec2_b08b, 0xbc7b_d194_9a2d_1982),
    pair(0x3fe2_e474_36e4_0268, 0x3c80_1508_61a4_886b),
    pair(0x3fe3_2b13_3912_1d71, 0x3c79_02ab_5b3d_916b),
    pair(0x3fe3_7117_b547_47b6, 0xbc7d_117e_dbdd_9103),
    pair(0x3fe3_b684_49ff_fc23, 0xbc84_1c48_4f9e_9b26),
    pair(0x3fe3_fb5b_84d1_6f42, 0x3c86_d3a7_5417_2aef),
    pair(0x3fe4_3f9f_e2f9_ce67, 0x3c8e_9c9e_e6d8_3b86),
    pair(0x3fe4_8353_d1ea_88df, 0x3c8c_f57a_2ecc_07f4),
    pair(0x3fe4_c679_afcc_ee3a, 0xbc83_a5c4_c8b3_9e41),
    pair(0x3fe5_0913_cc01_686b, 0x3c82_f2ce_96c2_d5b1),
    pair(0x3fe5_4b24_6799_9498, 0xbc85_baaf_5d2f_09f4),
    pair(0x3fe5_8cad_b5cd_7989, 0x3c78_4979_2ec9_8458),
    pair(0x3fe5_cdb1_dc6c_1765, 0xbc8c_c247_0e8a_3df4),
    pair(0x3fe6_0e32_f447_88d9, 0xbc7a_c1bb_52fa_589b),
];
