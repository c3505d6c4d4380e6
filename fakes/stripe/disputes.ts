import type Stripe from 'stripe';
import { DISPUTE_FEE, move } from './balance.ts';
import { invalid } from './errors.ts';
import { idOf, type World } from './world.ts';

const NO_EVIDENCE: Stripe.Dispute.Evidence = {
  access_activity_log: null,
  billing_address: null,
  cancellation_policy: null,
  cancellation_policy_disclosure: null,
  cancellation_rebuttal: null,
  customer_communication: null,
  customer_email_address: null,
  customer_name: null,
  customer_purchase_ip: null,
  customer_signature: null,
  duplicate_charge_documentation: null,
  duplicate_charge_explanation: null,
  duplicate_charge_id: null,
  enhanced_evidence: {},
  product_description: null,
  receipt: null,
  refund_policy: null,
  refund_policy_disclosure: null,
  refund_refusal_explanation: null,
  service_date: null,
  service_documentation: null,
  shipping_address: null,
  shipping_carrier: null,
  shipping_date: null,
  shipping_documentation: null,
  shipping_tracking_number: null,
  uncategorized_file: null,
  uncategorized_text: null,
};

/** The card holder disputes a charge: the unrefunded amount and a fee leave the platform's balance at once. */
export function openDispute(world: World, charge: Stripe.Charge, reason = 'fraudulent'): Stripe.Dispute {
  if (charge.status !== 'succeeded' || charge.disputed) throw invalid(`Charge ${charge.id} cannot be disputed.`);
  const amount = charge.amount - charge.amount_refunded;
  if (amount === 0) throw invalid(`Charge ${charge.id} is refunded in full.`);
  const id = world.id('du');
  const out = move(world, '', { amount: -amount, fee: DISPUTE_FEE, type: 'adjustment', category: 'dispute', source: id, description: `Chargeback withdrawal for ${charge.id}` });
  const made = {
    id,
    object: 'dispute',
    amount,
    balance_transactions: [out],
    charge: charge.id,
    created: world.now(),
    currency: 'usd',
    enhanced_eligibility_types: [],
    evidence: NO_EVIDENCE,
    evidence_details: { due_by: world.now() + 7 * 86_400, enhanced_eligibility: {}, has_evidence: false, past_due: false, submission_count: 0, submission_method: 'not_submitted' },
    intended_submission_method: null,
    is_charge_refundable: false,
    livemode: false,
    metadata: {},
    payment_intent: idOf(charge.payment_intent),
    payment_method_details: { type: 'card', card: { brand: 'visa', case_type: 'chargeback', network: 'visa', network_reason_code: '10.4' } },
    reason,
    status: 'needs_response',
  } satisfies Stripe.Dispute;
  world.store.put('dispute', id, made);
  world.store.put('charge', charge.id, { ...charge, disputed: true });
  world.emit('charge.dispute.created', made);
  world.emit('charge.dispute.funds_withdrawn', made);
  return made;
}

/** The bank decides: a won dispute brings the money back (the fee stays paid), a lost one leaves it gone. */
export function closeDispute(world: World, dispute: Stripe.Dispute, outcome: 'won' | 'lost'): Stripe.Dispute {
  if (dispute.status === 'won' || dispute.status === 'lost') throw invalid('This dispute is already closed.');
  const back =
    outcome === 'won'
      ? [move(world, '', { amount: dispute.amount, type: 'adjustment', category: 'dispute_reversal', source: dispute.id, description: `Chargeback reversal for ${idOf(dispute.charge)}` })]
      : [];
  const after: Stripe.Dispute = { ...dispute, status: outcome, balance_transactions: [...dispute.balance_transactions, ...back] };
  world.store.put('dispute', dispute.id, after);
  world.emit('charge.dispute.closed', after, { status: dispute.status });
  if (outcome === 'won') world.emit('charge.dispute.funds_reinstated', after);
  return after;
}

/**
 * Takes evidence. As at the provider's test mode, the text `winning_evidence` wins and `losing_evidence` loses when
 * submitted; anything else puts the dispute under review.
 */
export function answerDispute(world: World, dispute: Stripe.Dispute, evidence: { readonly [name: string]: string }, submit: boolean, metadata: Stripe.Metadata): Stripe.Dispute {
  if (dispute.status !== 'needs_response' && Object.keys(evidence).length > 0) throw invalid('This dispute has already been answered.');
  const count = dispute.evidence_details.submission_count + (submit ? 1 : 0);
  const after: Stripe.Dispute = {
    ...dispute,
    evidence: { ...dispute.evidence, ...evidence },
    evidence_details: { ...dispute.evidence_details, has_evidence: dispute.evidence_details.has_evidence || Object.keys(evidence).length > 0, submission_count: count, ...(submit ? { submission_method: 'manual' as const } : {}) },
    metadata,
    status: submit ? 'under_review' : dispute.status,
  };
  world.store.put('dispute', dispute.id, after);
  world.emit('charge.dispute.updated', after);
  if (submit && evidence['uncategorized_text'] === 'winning_evidence') return closeDispute(world, after, 'won');
  if (submit && evidence['uncategorized_text'] === 'losing_evidence') return closeDispute(world, after, 'lost');
  return after;
}
