import {
  diets,
  type DoorView,
  type RegistrationInput,
} from '@shared/features/registration/registration.contract';
import { dietNames } from '@shared/features/registration/registration.rules';
import { categoriesFor } from '@shared/features/finance/finance.rules';
import { formatMoney } from '@shared/lib/money';
import { addDays } from '@shared/lib/time';
import { useAccount } from '@/features/accounts/accounts.queries';
import { Checkbox, Choices, Input, Select } from '@/components/field';
import { Note } from '@/components/states';
import { countryOptions } from '@/lib/countries';

export interface StepProps {
  view: DoorView;
  input: RegistrationInput;
  change: (next: Partial<RegistrationInput>) => void;
  errors: Record<string, string>;
}

const Title = ({ children, lead }: { children: string; lead: string }) => (
  <>
    <h1 className="font-serif text-page">{children}</h1>
    <p className="mt-1 mb-6 text-ink2">{lead}</p>
  </>
);

export function YouStep({ view, input, change, errors }: StepProps) {
  const account = useAccount();
  const offered = categoriesFor(view.fees, account?.careerStage ?? null);
  return (
    <>
      <Title lead="Your profile is used for letters and certificates.">You</Title>
      <div className="grid gap-5">
        <Input
          label="Name on the badge"
          value={input.badgeName}
          onChange={(e) => change({ badgeName: e.target.value })}
          error={errors.badgeName}
        />
        <Select
          label="Fee category"
          value={input.categoryId}
          onChange={(e) => change({ categoryId: e.target.value })}
          options={offered.map((category) => ({ value: category.id, label: category.name }))}
          error={errors.categoryId}
          hint={
            account?.careerStage
              ? 'Those for your career stage are shown.'
              : 'Say your career stage in your profile to see the fees for it.'
          }
        />
      </div>
    </>
  );
}

export function StayStep({ view, input, change, errors }: StepProps) {
  const quantity = (id: string): number => input.extras.find((extra) => extra.extraId === id)?.quantity ?? 0;
  const put = (extraId: string, value: number) =>
    change({
      extras: [...input.extras.filter((extra) => extra.extraId !== extraId), { extraId, quantity: value }],
    });
  return (
    <>
      <Title lead="When you are here, and what you would like.">Stay and extras</Title>
      <div className="grid gap-5">
        <div className="grid grid-cols-2 gap-4 max-sm:grid-cols-1">
          <Input
            label="Arrive on"
            optional
            type="date"
            min={addDays(view.startsOn, -7)}
            max={view.endsOn}
            value={input.arrivesOn ?? ''}
            onChange={(e) => change({ arrivesOn: e.target.value || null })}
            error={errors.arrivesOn}
          />
          <Input
            label="Leave on"
            optional
            type="date"
            min={view.startsOn}
            max={addDays(view.endsOn, 7)}
            value={input.leavesOn ?? ''}
            onChange={(e) => change({ leavesOn: e.target.value || null })}
            error={errors.leavesOn}
          />
        </div>
        {view.fees.extras.length > 0 && (
          <fieldset>
            <legend className="mb-1 font-semibold">Extras</legend>
            <ul className="border-y border-ink">
              {view.fees.extras.map((extra) => {
                const gone = extra.left === 0;
                return (
                  <li
                    key={extra.id}
                    className="flex items-center gap-3 border-b border-rule py-2 last:border-b-0"
                  >
                    <Checkbox
                      className="grow"
                      label={
                        <>
                          {extra.name}{' '}
                          <span className="text-ink3">
                            {formatMoney(extra.priceMinor, view.fees.currency)}
                          </span>
                        </>
                      }
                      hint={
                        [
                          extra.hint,
                          gone
                            ? 'none left'
                            : extra.left !== null && extra.left <= 20
                              ? `${extra.left} left`
                              : '',
                        ]
                          .filter(Boolean)
                          .join('; ') || undefined
                      }
                      checked={quantity(extra.id) > 0}
                      disabled={gone}
                      onChange={(e) => put(extra.id, e.target.checked ? 1 : 0)}
                    />
                    {quantity(extra.id) > 0 && (
                      <Input
                        dense
                        hideLabel
                        label={`Number of ${extra.name}`}
                        type="number"
                        min={1}
                        max={extra.left ?? 20}
                        className="w-20"
                        value={quantity(extra.id)}
                        onChange={(e) => put(extra.id, Math.max(0, Number(e.target.value)))}
                      />
                    )}
                  </li>
                );
              })}
            </ul>
          </fieldset>
        )}
        <Select
          label="Food"
          value={input.diet}
          onChange={(e) => change({ diet: e.target.value as RegistrationInput['diet'] })}
          options={diets.map((value) => ({ value, label: dietNames[value] }))}
        />
        <Input
          label="Allergies"
          optional
          value={input.allergies}
          onChange={(e) => change({ allergies: e.target.value })}
          error={errors.allergies}
        />
        <Note>
          Seen by the event office and the kitchen only, and deleted after the event. What you write here
          counts portions; it is not a safety measure: the kitchen confirms allergens with you in person.
        </Note>
        <Input
          label="What else you need"
          optional
          value={input.needs}
          onChange={(e) => change({ needs: e.target.value })}
          error={errors.needs}
          hint="Access, child-care and the like; seen by the event office only."
        />
      </div>
    </>
  );
}

export function InvoiceStep({ input, change, errors }: StepProps) {
  const { invoice } = input;
  const put = (next: Partial<RegistrationInput['invoice']>) => change({ invoice: { ...invoice, ...next } });
  return (
    <>
      <Title lead="The receipt goes to you by e-mail and names whoever you enter here.">Invoice</Title>
      <div className="grid gap-5">
        <Choices
          legend="Who pays?"
          name="payer"
          value={invoice.payer}
          onChange={(payer) => put({ payer })}
          options={[
            { value: 'self', label: 'I pay myself' },
            { value: 'institute', label: 'My institute pays' },
            { value: 'grant', label: 'A travel grant pays' },
          ]}
        />
        <Input
          label="Name on the invoice"
          value={invoice.name}
          onChange={(e) => put({ name: e.target.value })}
          error={errors['invoice.name']}
        />
        <Input
          label="Street and number"
          optional
          autoComplete="street-address"
          value={invoice.street}
          onChange={(e) => put({ street: e.target.value })}
          error={errors['invoice.street']}
        />
        <div className="grid grid-cols-2 gap-4 max-sm:grid-cols-1">
          <Input
            label="Postcode"
            optional
            autoComplete="postal-code"
            value={invoice.postcode}
            onChange={(e) => put({ postcode: e.target.value })}
            error={errors['invoice.postcode']}
          />
          <Input
            label="Town"
            optional
            autoComplete="address-level2"
            value={invoice.town}
            onChange={(e) => put({ town: e.target.value })}
            error={errors['invoice.town']}
          />
          <Select
            label="Country"
            optional
            options={countryOptions}
            placeholder="Not said"
            value={invoice.country ?? ''}
            onChange={(e) => put({ country: e.target.value || null })}
            error={errors['invoice.country']}
          />
          <Input
            label="Your order number"
            optional
            value={invoice.orderNumber}
            onChange={(e) => put({ orderNumber: e.target.value })}
            error={errors['invoice.orderNumber']}
          />
        </div>
      </div>
    </>
  );
}

export function PayStep({ view, input, change, errors }: StepProps) {
  return (
    <>
      <Title lead="Your place is kept while you pay.">Pay</Title>
      <div className="grid gap-5">
        <p>
          You pay by card on the page of the card service and come back here. Until the payment has arrived,
          the place is kept for you for three days.
        </p>
        <Checkbox
          label={`The institute may keep these data for ${view.eventTitle}: to run the event, to write to me about it, and to keep its accounts as the law asks.`}
          hint="Organisers see name, affiliation and stay; the kitchen sees diets as counts; nobody else sees allergies and needs."
          checked={Boolean(input.consent)}
          onChange={(e) => change({ consent: e.target.checked as true })}
          error={errors.consent}
        />
      </div>
    </>
  );
}
