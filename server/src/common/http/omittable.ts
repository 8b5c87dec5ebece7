import { ValidateIf } from 'class-validator';

/** The field may be left out; unlike with IsOptional it may not be null. */
export const Omittable = () => ValidateIf((_, value) => value !== undefined);
