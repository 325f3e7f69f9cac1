import { setupZonelessTestEnv } from 'jest-preset-angular/setup-env/zoneless';
import { MATERIAL_ANIMATIONS } from '@angular/material/core';

setupZonelessTestEnv({
  errorOnUnknownElements: true,
  errorOnUnknownProperties: true,
  extraProviders: [{ provide: MATERIAL_ANIMATIONS, useValue: { animationsDisabled: true } }],
});
