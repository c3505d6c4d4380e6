import type { ReactElement } from 'react';
import { treeOwners, waysDown, metalRisks } from '~/domain/listing/answers.ts';
import { downCautions, metalCautions } from '~/domain/listing/cautions.ts';
import { Care, Choose, Line, Part, Tick, useForm } from './parts.tsx';

/** Whose tree it is, how and when it came down. */
export function TreePart(): ReactElement {
  const { typed } = useForm();
  return (
    <Part id="tree" number={1} title="The tree">
      <div className="grid gap-6 sm:grid-cols-2">
        <Choose name="treeOwner" legend="Whose tree is it?" options={treeOwners} hint="A tree on a boundary belongs to both neighbours. One beside a road or under a line may be the town’s or the utility’s; after a storm ask your insurer first." />
        <Choose name="howDown" legend="How did it come down?" options={waysDown} />
      </div>
      <Tick name="ownerConfirmed" label="I confirm that I may have this tree sawn" hint="Some states and towns ask for a notice before trees are cut: ask yours." />
      <Care danger={downCautions(typed.howDown)} />
      <div className="grid gap-6 sm:grid-cols-2">
        <Line name="cameDownOn" label="When?" type="date" hint="A guess is better than nothing: it decides how long the wood keeps." figure />
        <Choose name="sealed" legend="Are the log ends sealed?" options={[{ value: 'yes', label: 'Yes, with paint or wax', said: '' }, { value: 'no', label: 'No', said: '' }]} hint="Sealing the same day keeps the ends from checking." />
      </div>
    </Part>
  );
}

/** What may be in the wood. */
export function MetalPart(): ReactElement {
  const { typed } = useForm();
  return (
    <Part id="metal" number={6} title="Metal in the wood" lead="A nail costs a blade. Hits are charged at the sawyer’s prices, up to the cap of the bid, so say what you know.">
      <Choose name="metal" legend="What do you know?" options={metalRisks} />
      <Line name="metalNote" label="Where" optional hint="A swing hung from it, a sign was nailed to it, wire grew into it." maxLength={500} />
      <Care danger={metalCautions(typed.metal)} />
    </Part>
  );
}
