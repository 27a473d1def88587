/** The sentence that ends each safety caution. */
export const cautionClosing =
  'Follow the approved protocol, local policy and the judgement of licensed staff. Research use only, not for diagnosis or treatment.';

/**
 * Cautions shown where the work can hurt someone, or where a number may be taken for a diagnosis.
 * An instrument names them by code. Display text only: the product gives no medical instruction.
 * Figures: Nuttall 2016 Anesthesiology (arterial lines); Johnson 2014 (volunteer phlebotomy).
 */
export const cautionTexts = {
  'research-use': {
    title: 'Research use',
    text: 'These values serve a research question. They are not checked or meant for the care of this person.',
  },
  'cuff-occlusion': {
    title: 'Cuff occlusion',
    text: 'Tingling and discomfort are to be expected while a cuff stops the circulation; pain is a reason to release it. The protocol states the longest time and who must not be cuffed (for example thrombosis, sickle cell disease, lymphoedema side, fistula arm).',
  },
  'blood-sampling': {
    title: 'Blood sampling',
    text: 'Only trained staff draw blood. Watch for fainting and bruising. The volume drawn counts towards the limit of the protocol for this participant.',
  },
  'blood-exchange': {
    title: 'Blood withdrawal and replacement',
    text: 'Volume limits, the lowest allowed haemoglobin and haematocrit, the replacement fluid and the stopping rules are set by the approved protocol and local policy; this product recommends none of them. Stop and call the study physician when a stopping rule is met.',
  },
  'arterial-cannulation': {
    title: 'Arterial cannulation',
    text: 'Qualified staff only: collateral flow, bleeding risk, anticoagulants, allergy, sterile technique, observation after removal, written advice. Severe complications of arterial lines were reported in about 8 of 10 000 patients of a large perioperative series; the brachial site lacks collateral supply and lies beside the median nerve.',
  },
  'drug-infusion': {
    title: 'Drug infusion',
    text: 'Dose, concentration, pump rate, highest dose, stopping rules and rescue come from the protocol and the prescriber. This product records them and computes no dose.',
  },
  handgrip: {
    title: 'Handgrip exercise',
    text: 'Pressure and heart rate rise during the effort. Stop at the criteria of the protocol or when the participant asks; breath is not to be held.',
  },
  'cold-pressor': {
    title: 'Cold pressor test',
    text: 'Immersion in ice water hurts and raises the pressure. The protocol states the longest time and who must not take part; the participant may withdraw the hand at any moment.',
  },
  'adverse-event': {
    title: 'Adverse events',
    text: 'A serious event is reported at once by the route of the protocol; entering it here does not replace that call. Avoid words that may tell the allocated condition.',
  },
  unblinding: {
    title: 'Unblinding values',
    text: 'These values can reveal the allocated condition. Do not speak of them, show them or leave them in view of blinded staff or the participant.',
  },
} as const satisfies Record<string, { title: string; text: string }>;
