//! Numbers in vector lanes that read like numbers.
//!
//! One formula serves every processor: `pulp` chooses the lane width when the
//! program starts. AVX2 and AVX-512 give the same bits, since every lane sees
//! the same fused operations; a processor without fused multiply-add rounds
//! twice and may differ in the last bits.

use std::ops::{Add, Div, Mul, Sub};

use pulp::Simd;

/// Some f64 values, one in each lane.
#[derive(Clone, Copy, Debug)]
pub(super) struct Lanes<S: Simd> {
    simd: S,
    values: S::f64s,
}

/// True or false in each lane.
#[derive(Clone, Copy)]
pub(super) struct Mask<S: Simd>(S::m64s);

const EXPONENT_BITS: u64 = 0x7ff0_0000_0000_0000;
const MANTISSA_BITS: u64 = 0x000f_ffff_ffff_ffff;
const ONE_BITS: u64 = 0x3ff0_0000_0000_0000;
/// 2²⁰, whose mantissa counts whole units in its upper half-word: an integer
/// or-ed in there reads as that integer plus 2²⁰.
const TWO_POW_20_BITS: u64 = 0x4130_0000_0000_0000;
const TWO_POW_20: f64 = 1_048_576.0;
const EXPONENT_BIAS: f64 = 1023.0;

impl<S: Simd> Lanes<S> {
    #[inline(always)]
    pub fn new(simd: S, values: S::f64s) -> Self {
        Self { simd, values }
    }

    #[inline(always)]
    pub fn splat(simd: S, value: f64) -> Self {
        Self::new(simd, simd.splat_f64s(value))
    }

    /// The same value in each lane, in the company of `self`.
    #[inline(always)]
    pub fn constant(self, value: f64) -> Self {
        Self::splat(self.simd, value)
    }

    #[inline(always)]
    pub fn values(self) -> S::f64s {
        self.values
    }

    /// self · factor + addend, fused where the processor can.
    #[inline(always)]
    pub fn mul_add(self, factor: Self, addend: Self) -> Self {
        let product = self
            .simd
            .mul_add_e_f64s(self.values, factor.values, addend.values);
        Self::new(self.simd, product)
    }

    #[inline(always)]
    pub fn max(self, other: Self) -> Self {
        Self::new(self.simd, self.simd.max_f64s(self.values, other.values))
    }

    #[inline(always)]
    pub fn min(self, other: Self) -> Self {
        Self::new(self.simd, self.simd.min_f64s(self.values, other.values))
    }

    #[inline(always)]
    pub fn below(self, other: Self) -> Mask<S> {
        Mask(self.simd.less_than_f64s(self.values, other.values))
    }

    #[inline(always)]
    pub fn select(mask: Mask<S>, if_true: Self, if_false: Self) -> Self {
        let simd = if_true.simd;
        let chosen = simd.select_f64s(mask.0, if_true.values, if_false.values);
        Self::new(simd, chosen)
    }

    #[inline(always)]
    fn bits(self) -> S::u64s {
        self.simd.transmute_u64s_f64s(self.values)
    }

    #[inline(always)]
    fn from_bits(simd: S, bits: S::u64s) -> Self {
        Self::new(simd, simd.transmute_f64s_u64s(bits))
    }

    /// The whole k ≥ 0 and self · 2^(−k) with base ≤ self · 2^(−k) < 2 base;
    /// k = 0 where self is less than twice the base. Normal positive values
    /// only.
    ///
    /// The bits of positive numbers count like the numbers themselves: the
    /// exponent field of the difference of two is k.
    #[inline(always)]
    pub fn scaled_down_to(self, base: Self) -> (Self, Self) {
        let simd = self.simd;
        let apart = simd.sub_u64s(self.max(base).bits(), base.bits());
        let field = simd.and_u64s(apart, simd.splat_u64s(EXPONENT_BITS));
        let scaled = Self::from_bits(simd, simd.sub_u64s(self.bits(), field));
        let integer = shift_upper_halves(simd, field, Shift::Right);
        let marked = simd.or_u64s(integer, simd.splat_u64s(TWO_POW_20_BITS));
        let power = Self::from_bits(simd, marked) - self.constant(TWO_POW_20);
        (power, scaled)
    }

    /// m of m · 2^e, 1 ≤ m < 2; normal positive values only.
    #[inline(always)]
    pub fn mantissa(self) -> Self {
        let simd = self.simd;
        let mantissa = simd.and_u64s(self.bits(), simd.splat_u64s(MANTISSA_BITS));
        Self::from_bits(simd, simd.or_u64s(mantissa, simd.splat_u64s(ONE_BITS)))
    }

    /// e of m · 2^e as a number; normal positive values only.
    #[inline(always)]
    pub fn exponent(self) -> Self {
        let simd = self.simd;
        let field = simd.and_u64s(self.bits(), simd.splat_u64s(EXPONENT_BITS));
        let integer = shift_upper_halves(simd, field, Shift::Right);
        let marked = simd.or_u64s(integer, simd.splat_u64s(TWO_POW_20_BITS));
        Self::from_bits(simd, marked) - self.constant(TWO_POW_20 + EXPONENT_BIAS)
    }

    /// 2^k for a whole number k with −1022 ≤ k ≤ 1023.
    #[inline(always)]
    pub fn power_of_two(self) -> Self {
        let simd = self.simd;
        // k + 1023 + 2²⁰ holds the exponent field in the upper half of its
        // bits; a half-word shift takes it to where exponents live.
        let marked = self + self.constant(TWO_POW_20 + EXPONENT_BIAS);
        let integer = simd.and_u64s(marked.bits(), simd.splat_u64s(0x7ff << 32));
        let field = shift_upper_halves(simd, integer, Shift::Left);
        Self::from_bits(simd, field)
    }
}

#[derive(Clone, Copy, PartialEq, Eq)]
enum Shift {
    Left,
    Right,
}

/// Moves the upper half of each lane's bits by the 20 places between a
/// half-word integer and an exponent field; the lower halves must be zero.
///
/// Vector sets have no common 64-bit shift, but all of them shift 32-bit
/// lanes; a single lane shifts as it is.
#[inline(always)]
fn shift_upper_halves<S: Simd>(simd: S, bits: S::u64s, shift: Shift) -> S::u64s {
    const PLACES: u32 = 20;
    if size_of::<S::u64s>() == size_of::<u64>() {
        let lane = bytemuck::cast::<S::u64s, u64>(bits);
        return bytemuck::cast(match shift {
            Shift::Left => lane << PLACES,
            Shift::Right => (lane >> PLACES) & (u64::MAX << 32),
        });
    }
    let halves = bytemuck::cast::<S::u64s, S::u32s>(bits);
    let places = simd.splat_u32s(PLACES);
    bytemuck::cast(match shift {
        Shift::Left => simd.wrapping_dyn_shl_u32s(halves, places),
        Shift::Right => simd.wrapping_dyn_shr_u32s(halves, places),
    })
}

macro_rules! operator {
    ($trait:ident, $method:ident, $function:ident) => {
        impl<S: Simd> $trait for Lanes<S> {
            type Output = Self;

            #[inline(always)]
            fn $method(self, other: Self) -> Self {
                Self::new(self.simd, self.simd.$function(self.values, other.values))
            }
        }
    };
}

operator!(Add, add, add_f64s);
operator!(Sub, sub, sub_f64s);
operator!(Mul, mul, mul_f64s);
operator!(Div, div, div_f64s);
